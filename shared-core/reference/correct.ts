import type { AssignedLine } from '../assignment/types.ts';
import type { Correction } from './types.ts';

/** Id of a line of a band: "H35Cl/1-0/R/0". */
export function lineId(isotopologue: string, band: string, m: number): string {
  return `${isotopologue}/${band}/${m > 0 ? 'R' : 'P'}/${m > 0 ? m - 1 : -m}`;
}

/**
 * Assigned lines after the corrections that act on single lines and on the numbering; pure, order of corrections kept.
 *
 * An index shift s moves every m of the band by s; a line that would become m = 0 does not exist in such a band and is left out.
 *
 * @param lines lines as assigned blind. @param corrections in the order in which they were made.
 * @returns new lines; ids follow the new numbering.
 */
export function correctLines(
  lines: readonly AssignedLine[],
  corrections: readonly Correction[],
): readonly AssignedLine[] {
  return corrections.reduce<readonly AssignedLine[]>((current, c) => {
    switch (c.kind) {
      case 'index-shift':
        return current.flatMap((l) =>
          l.isotopologue === c.isotopologue && l.band === c.band ? shifted(l, c.shift) : [l],
        );
      case 'line-out':
        return change(current, c.lineId, { used: false, leftOutBecause: 'left out by the instructor' });
      case 'line-in':
      case 'outlier-accepted':
        return change(current, c.lineId, { used: true, leftOutBecause: null, accepted: true });
      case 'line-moved':
        return change(current, c.lineId, { wavenumberPerCm: c.wavenumberPerCm });
      default:
        return current;
    }
  }, lines);
}

function change(
  lines: readonly AssignedLine[],
  id: string,
  to: Partial<AssignedLine>,
): readonly AssignedLine[] {
  return lines.map((l) => (l.id === id ? { ...l, ...to } : l));
}

function shifted(line: AssignedLine, shift: number): AssignedLine[] {
  const m = line.m + shift;
  if (m === 0) return [];
  const branch = m > 0 ? 'R' : 'P';
  const jLower = m > 0 ? m - 1 : -m;
  return [{ ...line, m, branch, jLower, id: lineId(line.isotopologue, line.band, m) }];
}
