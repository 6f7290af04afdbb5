import type { MethodLine } from '../../reference/methods/method-line.ts';
import type { SlipFinding } from '../types.ts';
import { assignmentSlips } from './catalogue-assignment.ts';
import type { SlipSurroundings } from './definition.ts';
import { logSum } from './likelihood.ts';
import { shown } from './numbers.ts';

/** Scatter that a student's reading of a line is granted, cm-1: half-resolved doublets and coarse sampling included. */
const readingScatterPerCm = 0.25;
/** A line further off than five times that is no reading of the line it is called. */
const mostPerLine = 25;
const priorOfCorrectTable = 0.75;
const priorOfUnknown = 0.05;
const shownFrom = 0.05;

/** A line of the table that is not where the file has it. */
export interface OddLine {
  readonly m: number;
  readonly wavenumberPerCm: number;
  /** Where the file has the line of that m; null where it has none. */
  readonly expectedPerCm: number | null;
}

/** What a table of lines shows by itself. */
export interface LineTableVerdict {
  readonly findings: readonly SlipFinding[];
  /** Single lines that are off while the rest of the table is right. */
  readonly odd: readonly OddLine[];
}

interface Way {
  readonly code: string | null;
  readonly formula: string;
  readonly what: string;
  readonly logPrior: number;
  readonly expected: ReadonlyMap<number, number>;
}

/**
 * Holds a student's table of lines against the file's, line by line: correct, numbered in one of the wrong ways of the catalogue, of
 * another isotopologue, between the lines; and names single lines that are off.
 *
 * @param table the student's lines. @param reference lines of the isotopologue in the file.
 */
export function lineTableVerdict(
  table: readonly MethodLine[],
  reference: readonly MethodLine[],
  around: SlipSurroundings,
  isotopologue: string,
): LineTableVerdict {
  const ways = waysOf(reference, around);
  const weights = ways.map((w) => w.logPrior - costOf(table, w.expected) / 2);
  const unknown = Math.log(priorOfUnknown) - (table.length * 16) / 2;
  const total = logSum([...weights, unknown]);
  const probabilities = weights.map((w) => Math.exp(w - total));
  const byCode = new Map<string, { probability: number; way: Way; best: number }>();
  ways.forEach((way, i) => {
    if (way.code === null) return;
    const p = probabilities[i]!;
    const entry = byCode.get(way.code);
    byCode.set(way.code, {
      probability: (entry?.probability ?? 0) + p,
      way: entry !== undefined && entry.best >= p ? entry.way : way,
      best: Math.max(entry?.best ?? 0, p),
    });
  });
  const correct = probabilities[ways.findIndex((w) => w.code === null)] ?? 0;
  const findings = [...byCode]
    .filter(([, e]) => e.probability >= shownFrom)
    .sort(([, a], [, b]) => b.probability - a.probability)
    .map(([code, { probability, way }]) => finding(code, probability, way, table, isotopologue));
  return { findings, odd: correct > 0.5 ? oddLines(table, ways.find((w) => w.code === null)!.expected) : [] };
}

function waysOf(reference: readonly MethodLine[], around: SlipSurroundings): Way[] {
  const correct: Way = {
    code: null,
    formula: '',
    what: '',
    logPrior: Math.log(priorOfCorrectTable),
    expected: byM(reference),
  };
  const total = assignmentSlips.reduce((sum, d) => sum + d.weight, 0);
  const slips = assignmentSlips.flatMap((definition) => {
    const variants = definition
      .variants(around)
      .filter((v) => v.replay !== undefined && v.steps === undefined);
    return variants.flatMap((variant): Way[] => {
      const replayed = variant.replay!(reference);
      if (replayed === null) return [];
      const prior =
        ((1 - priorOfCorrectTable - priorOfUnknown) * definition.weight) / total / variants.length;
      return [
        {
          code: definition.code,
          formula: variant.formula,
          what: definition.what,
          logPrior: Math.log(prior),
          expected: byM(replayed.lines),
        },
      ];
    });
  });
  return [correct, ...slips];
}

function byM(lines: readonly MethodLine[]): Map<number, number> {
  return new Map(lines.map((l) => [l.m, l.wavenumberPerCm]));
}

function costOf(table: readonly MethodLine[], expected: ReadonlyMap<number, number>): number {
  return table.reduce((sum, line) => {
    const at = expected.get(line.m);
    const off = at === undefined ? Infinity : (line.wavenumberPerCm - at) / readingScatterPerCm;
    return sum + Math.min(mostPerLine, off * off);
  }, 0);
}

function oddLines(table: readonly MethodLine[], expected: ReadonlyMap<number, number>): OddLine[] {
  return table.flatMap((line) => {
    const at = expected.get(line.m);
    // Lines beyond those that the file shows for certain cannot be called wrong.
    if (at === undefined || Math.abs(line.wavenumberPerCm - at) < 5 * readingScatterPerCm) return [];
    return [{ m: line.m, wavenumberPerCm: line.wavenumberPerCm, expectedPerCm: at }];
  });
}

function finding(
  code: string,
  probability: number,
  way: Way,
  table: readonly MethodLine[],
  isotopologue: string,
): SlipFinding {
  const matching = table.filter(
    (l) => Math.abs(l.wavenumberPerCm - (way.expected.get(l.m) ?? Infinity)) < 5 * readingScatterPerCm,
  );
  const sample = matching[Math.floor(matching.length / 2)];
  const example =
    sample === undefined
      ? ''
      : ` For example m = ${sample.m} stands at ${shown(sample.wavenumberPerCm)} cm⁻¹, where this gives ${shown(way.expected.get(sample.m)!)} cm⁻¹.`;
  return {
    code,
    probability,
    isotopologue,
    quantities: [],
    text: `${way.what} (${way.formula}): ${matching.length} of the ${table.length} lines handed in stand where this puts them.${example}`,
    tellApart: null,
  };
}

/** Name of a line from its m: R(J) for m = J + 1, P(J) for m = −J. */
export function lineName(m: number): string {
  return m > 0 ? `R(${m - 1})` : `P(${-m})`;
}
