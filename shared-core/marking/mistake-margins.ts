import { isotopologue as isotopologueNamed } from '../molecule/isotopologue.ts';
import { publishedConstants } from '../molecule/published-constants.ts';
import type { Isotopologue } from '../molecule/types.ts';
import { valuesByMethod } from '../reference/methods/constants-by-method.ts';
import { standardSteps } from '../reference/methods/derive.ts';
import type { LineSet } from '../reference/methods/line-sets.ts';
import type { QuantityKey } from '../units/types.ts';
import { askedOf } from './asked.ts';
import { otherHeavyOf, publishedExtra, publishedLines, usualLinesASide } from './published-lines.ts';
import { slipNamed } from './slips/catalogue.ts';
import type { SlipSurroundings, SlipVariant } from './slips/definition.ts';
import { symbols } from './slips/numbers.ts';
import { predict, withSlips } from './slips/predict.ts';
import { readingOf } from './slips/reading.ts';
import { toleranceHalfWidth } from './tolerance.ts';
import type { MarkingScheme, QuantityRule, Tolerance } from './types.ts';
import { otherHydrogen } from './prescribe.ts';

/** Distance from a correct value to the nearest of the mistakes that a scheme wants told apart. */
export interface MistakeMargin {
  readonly isotopologue: string;
  readonly quantity: QuantityKey;
  /** Slip that comes nearest, or null where none of those named moves this quantity. */
  readonly nearest: string | null;
  /** In the standard unit, and as a share of the value; null without a nearest slip or for an unlisted gas. */
  readonly absolute: number | null;
  readonly relative: number | null;
  /** Sentences where a tolerance reaches too far: full credit from half the margin on, part credit from all of it. */
  readonly warnings: readonly string[];
}

/** Full-credit tolerance stays below this share of the margin, part credit below all of it. */
export const fullShareOfMargin = 0.5;

/** Mistake margins of every quantity asked for, from published lines of each isotopologue by the first prescribed method. */
export function mistakeMargins(scheme: MarkingScheme): MistakeMargin[] {
  return scheme.isotopologues.flatMap((name) =>
    askedOf(scheme, [name]).map(({ rule }) => {
      const margin = marginOf(scheme, name, rule.key, rule.tellApart);
      return { ...margin, warnings: warningsOf(rule, margin) };
    }),
  );
}

/** Margin of one quantity against some slips. */
export function marginOf(
  scheme: MarkingScheme,
  name: string,
  quantity: QuantityKey,
  codes: readonly string[],
): Omit<MistakeMargin, 'warnings'> & { readonly value: number | null } {
  const blank = { isotopologue: name, quantity, nearest: null, absolute: null, relative: null };
  const molecule = isotopologueNamed(name);
  const around = molecule === null ? null : publishedSurroundings(scheme, molecule);
  if (molecule === null || around === null) return { ...blank, value: null };
  const correct = valuesByMethod(around.set.lines, scheme.methods[0]!, scheme, molecule, around.extra)[
    quantity
  ];
  if (correct === undefined) return { ...blank, value: null };
  let nearest: string | null = null;
  let least = Infinity;
  for (const code of codes) {
    for (const variant of slipNamed(code)?.variants(around.surroundings) ?? []) {
      const value = slippedValue(scheme, molecule, around, variant, quantity);
      const distance = value === null ? 0 : Math.abs(value - correct);
      if (distance > 1e-6 * Math.abs(correct) && distance < least) [nearest, least] = [code, distance];
    }
  }
  if (nearest === null) return { ...blank, value: correct };
  return { ...blank, nearest, absolute: least, relative: least / Math.abs(correct), value: correct };
}

interface Published {
  readonly set: LineSet;
  readonly extra: ReturnType<typeof publishedExtra>;
  readonly surroundings: SlipSurroundings;
}

function publishedSurroundings(scheme: MarkingScheme, molecule: Isotopologue): Published | null {
  const sides = Math.min(usualLinesASide(molecule), scheme.lines.rule === 'up-to' ? scheme.lines.m : 10);
  const lines = publishedLines(molecule.name, 1, sides);
  const published = publishedConstants(molecule.name);
  if (lines === null || published === null) return null;
  const extra = publishedExtra(molecule, sides);
  const beside = (name: string | null): SlipSurroundings['otherHeavy'] => {
    const other = name === null ? null : isotopologueNamed(name);
    const otherLines = name === null ? null : publishedLines(name, 1, sides);
    return other === null || otherLines === null ? null : { isotopologue: other, lines: otherLines };
  };
  return {
    set: { label: 'published', lines },
    extra,
    surroundings: {
      isotopologue: molecule,
      settings: scheme,
      method: scheme.methods[0]!,
      submitted: new Set(scheme.quantities.map((q) => q.key)),
      linesASide: [sides],
      otherHeavy: beside(otherHeavyOf(molecule)),
      otherLight: beside(otherHydrogen(molecule)),
      overtone: extra.overtone ?? null,
      handbook: { omegaE: published.omegaEPerCm, omegaExe: published.omegaExePerCm },
    },
  };
}

function slippedValue(
  scheme: MarkingScheme,
  molecule: Isotopologue,
  { set, extra }: Published,
  variant: SlipVariant,
  quantity: QuantityKey,
): number | null {
  const reading = readingOf([set], scheme.methods[0]!, scheme, molecule, extra, variant.replay);
  if (reading === null) return null;
  return predict(reading.context(reading.mean), withSlips(standardSteps, [variant]))[quantity] ?? null;
}

function warningsOf(rule: QuantityRule, margin: ReturnType<typeof marginOf>): string[] {
  const { value, absolute, nearest } = margin;
  if (value === null || absolute === null || nearest === null) return [];
  const width = (t: Tolerance): number => toleranceHalfWidth(t, { value, uncertainty: null });
  const words = `${symbols[rule.key]} of ${margin.isotopologue}: "${nearest}" lies ${((100 * absolute) / Math.abs(value)).toPrecision(3)} % away`;
  return [
    ...(width(rule.full) > fullShareOfMargin * absolute
      ? [`${words}, and full credit reaches over half of that.`]
      : []),
    ...(rule.part !== null && width(rule.part) >= absolute
      ? [`${words}, and part credit reaches as far.`]
      : []),
  ];
}
