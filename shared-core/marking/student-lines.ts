import type { MethodLine } from '../reference/methods/method-line.ts';
import type { Submission } from './types.ts';

/** Rounding of a wavenumber in a table of lines, cm-1: common practice is two or three decimals. */
const tableRoundingPerCm = 3e-3;
/** Fewer lines carry no fit. */
const fewestLines = 5;

/** The student's own table of lines for one isotopologue; null where none was handed in. */
export function ownLinesOf(
  submission: Submission,
  isotopologue: string,
  isotopologues: readonly string[],
): MethodLine[] | null {
  const unnamed = submission.isotopologue ?? isotopologues[0];
  const lines = submission.lines
    .filter((l) => (l.isotopologue ?? unnamed) === isotopologue && Number.isFinite(l.wavenumberPerCm))
    .map((l) => ({ m: l.m, wavenumberPerCm: l.wavenumberPerCm, uncertaintyPerCm: tableRoundingPerCm }));
  return lines.length < fewestLines ? null : lines.sort((a, b) => a.wavenumberPerCm - b.wavenumberPerCm);
}
