import type { GlyphName } from './glyphs.ts';

/** A line as a picture shows it. */
export interface ChartLine {
  readonly id: string;
  readonly isotopologue: string;
  readonly glyph: GlyphName;
  readonly branch: 'P' | 'R';
  readonly jLower: number;
  readonly wavenumberPerCm: number;
  readonly uncertaintyPerCm: number | null;
  readonly residualPerCm: number | null;
  readonly used: boolean;
}

/** A line as the student numbered it. */
export interface HandedInLine {
  readonly label: string;
  readonly branch: 'P' | 'R';
  readonly wavenumberPerCm: number;
  /** False where the student's number differs from the reference's. */
  readonly agrees: boolean;
}

/** Range of the band around the lines, with a margin of 12 % on each side (at least 30 cm-1); null without lines. */
export function bandRange(
  lines: readonly { readonly wavenumberPerCm: number }[],
): { readonly from: number; readonly to: number } | null {
  if (lines.length === 0) return null;
  let low = Infinity;
  let high = -Infinity;
  for (const line of lines) {
    low = Math.min(low, line.wavenumberPerCm);
    high = Math.max(high, line.wavenumberPerCm);
  }
  const margin = Math.max(30, 0.12 * (high - low));
  return { from: low - margin, to: high + margin };
}

/** Symmetric bound of the residual axis that holds every used residual with its error bar: 1, 2 or 5 times a power of ten. */
export function residualBound(lines: readonly ChartLine[]): number {
  let most = 0;
  for (const line of lines) {
    if (line.residualPerCm === null || !line.used) continue;
    most = Math.max(most, Math.abs(line.residualPerCm) + (line.uncertaintyPerCm ?? 0));
  }
  if (most === 0) return 0.01;
  const power = 10 ** Math.floor(Math.log10(most));
  for (const step of [1, 2, 5, 10]) if (most <= step * power) return step * power;
  return 10 * power;
}

/** Label of a tick, with as many decimals as the spacing of the ticks needs and no thousands separator. */
export function tickLabel(value: number, spacing: number): string {
  const decimals = spacing >= 1 || spacing <= 0 ? 0 : Math.min(6, Math.ceil(-Math.log10(spacing) - 1e-9));
  return value.toFixed(decimals).replace('-', '\u2212');
}
