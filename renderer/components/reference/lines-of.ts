import type { AssignedLine } from '../../../shared-core/assignment/types.ts';
import type { SubmittedLine } from '../../../shared-core/marking/types.ts';
import type { ChartLine, HandedInLine } from '../../charts/chart-lines.ts';
import { glyphAt } from '../../charts/glyphs.ts';
import type { GlyphName } from '../../charts/glyphs.ts';

/** One shape per isotopologue, in the order in which the lines name them. */
export function glyphsOf(
  lines: readonly { readonly isotopologue: string }[],
): ReadonlyMap<string, GlyphName> {
  const glyphs = new Map<string, GlyphName>();
  for (const { isotopologue } of lines) {
    if (!glyphs.has(isotopologue)) glyphs.set(isotopologue, glyphAt(glyphs.size));
  }
  return glyphs;
}

/** Assigned lines as the chart draws them. */
export function chartLinesOf(lines: readonly AssignedLine[]): readonly ChartLine[] {
  const glyphs = glyphsOf(lines);
  return lines.map((line) => ({
    id: line.id,
    isotopologue: line.isotopologue,
    glyph: glyphs.get(line.isotopologue)!,
    branch: line.branch,
    jLower: line.jLower,
    wavenumberPerCm: line.wavenumberPerCm,
    uncertaintyPerCm: line.uncertaintyPerCm,
    residualPerCm: line.residualPerCm,
    used: line.used,
  }));
}

/** "R(3)", the trade's name of a line. */
export function lineName(line: { readonly branch: string; readonly jLower: number }): string {
  return `${line.branch}(${line.jLower})`;
}

/** Largest distance at which a line that was handed in counts as one of the file's, cm-1. */
const reachPerCm = 1;

/** Lines as the student numbered them, each compared with the nearest line of the reference. */
export function handedInLinesOf(
  submitted: readonly SubmittedLine[],
  assigned: readonly AssignedLine[],
): readonly HandedInLine[] {
  return submitted.map((line) => {
    let nearest: AssignedLine | null = null;
    for (const candidate of assigned) {
      const distance = Math.abs(candidate.wavenumberPerCm - line.wavenumberPerCm);
      if (distance > reachPerCm) continue;
      if (nearest === null || distance < Math.abs(nearest.wavenumberPerCm - line.wavenumberPerCm))
        nearest = candidate;
    }
    return {
      label: line.m >= 1 ? `R(${line.m - 1})` : `P(${-line.m})`,
      branch: line.m >= 1 ? 'R' : 'P',
      wavenumberPerCm: line.wavenumberPerCm,
      agrees:
        nearest !== null &&
        nearest.m === line.m &&
        (line.isotopologue === null || line.isotopologue === nearest.isotopologue),
    };
  });
}
