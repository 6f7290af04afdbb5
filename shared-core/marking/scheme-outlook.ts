import { isotopologue as isotopologueNamed } from '../molecule/isotopologue.ts';
import { constantsByMethod } from '../reference/methods/constants-by-method.ts';
import { prescribedConstants } from '../reference/methods/prescribed-constants.ts';
import type { PrescribedMethod } from '../reference/types.ts';
import type { QuantityKey, StandardUnit } from '../units/types.ts';
import { askedOf } from './asked.ts';
import { marginOf, mistakeMargins } from './mistake-margins.ts';
import { publishedExtra, publishedLines, usualLinesASide } from './published-lines.ts';
import { shown, symbols } from './slips/numbers.ts';
import { toleranceHalfWidth } from './tolerance.ts';
import type { MarkingScheme, QuantityRule } from './types.ts';

/** What published lines would give under a scheme, for one quantity of one isotopologue; standard units. */
export interface QuantityOutlook {
  readonly isotopologue: string;
  readonly quantity: QuantityKey;
  readonly unit: StandardUnit | null;
  readonly method: string;
  /** By the prescribed method; null where no accepted method yields it. */
  readonly value: number | null;
  readonly low: number | null;
  readonly high: number | null;
  /** By the full model. */
  readonly best: number | null;
  readonly full: number | null;
  readonly part: number | null;
  /** Mistake margin and the slip that sets it. */
  readonly margin: number | null;
  readonly nearest: string | null;
  readonly warnings: readonly string[];
}

const fullModel: PrescribedMethod = { fit: 'polynomial', degree: 4, distortion: 'free' };

/**
 * Live on a scheme: values that published lines would give, span over line choices, gap to the full model, mistake margins, warnings.
 * Gases that are not listed are left out with one warning each.
 */
export function schemeOutlook(scheme: MarkingScheme): QuantityOutlook[] {
  const margins = mistakeMargins(scheme);
  return scheme.isotopologues.flatMap((name) =>
    askedOf(scheme, [name]).map(({ rule }) => {
      const margin = margins.find((m) => m.isotopologue === name && m.quantity === rule.key);
      return outlookOf(scheme, name, rule, margin?.warnings ?? []);
    }),
  );
}

function outlookOf(
  scheme: MarkingScheme,
  name: string,
  rule: QuantityRule,
  marginWarnings: readonly string[],
): QuantityOutlook {
  const blank: QuantityOutlook = {
    isotopologue: name, quantity: rule.key, unit: null, method: '', value: null, low: null, high: null, best: null,
    full: null, part: null, margin: null, nearest: null, warnings: [],
  }; // prettier-ignore
  const molecule = isotopologueNamed(name);
  const sides = molecule === null ? 0 : usualLinesASide(molecule);
  const lines = molecule === null ? null : publishedLines(name, 1, sides);
  if (molecule === null || lines === null)
    return { ...blank, warnings: [`${name} is not listed: no outlook from published lines.`] };
  const extra = publishedExtra(molecule, sides);
  const spans = scheme.methods.map((m) =>
    prescribedConstants(lines, m, scheme, molecule, scheme.lines, { known: 'nothing' }, extra),
  );
  const span = spans.find((s) => s.constants.values[rule.key] !== undefined);
  const value = span?.constants.values[rule.key];
  if (span === undefined || value === undefined) {
    return {
      ...blank,
      warnings: [`No accepted method yields ${symbols[rule.key]}: its points would stay open for everyone.`],
    };
  }
  const best = constantsByMethod(lines, fullModel, scheme, molecule, extra)[rule.key]?.value ?? null;
  const full = toleranceHalfWidth(rule.full, { value: value.value, uncertainty: null });
  const part =
    rule.part === null ? null : toleranceHalfWidth(rule.part, { value: value.value, uncertainty: null });
  const margin = marginOf(scheme, name, rule.key, rule.tellApart);
  return {
    ...blank,
    unit: value.unit,
    method: span.constants.method,
    value: value.value,
    low: value.low,
    high: value.high,
    best,
    full,
    part,
    margin: margin.absolute,
    nearest: margin.nearest,
    warnings: [
      ...marginWarnings,
      ...spanWarning(rule.key, name, value.high - value.low, full, margin.absolute),
      ...gapWarning(rule.key, name, value.value, best, full),
    ],
  };
}

/** The mark follows the lines chosen: where span and tolerance together reach the nearest mistake, the choice has to be known. */
function spanWarning(
  key: QuantityKey,
  name: string,
  width: number,
  full: number,
  margin: number | null,
): string[] {
  if (margin === null || width + full < margin) return [];
  return [
    `${symbols[key]} of ${name} moves by ${shown(width, 2)} with the choice of lines; with the tolerance of ${shown(full, 2)} that reaches the nearest mistake (${shown(margin, 2)} away). Fix the range of lines, or ask for their number or a table of lines.`,
  ];
}

function gapWarning(
  key: QuantityKey,
  name: string,
  prescribed: number,
  best: number | null,
  full: number,
): string[] {
  if (best === null || Math.abs(prescribed - best) <= full) return [];
  return [
    `${symbols[key]} of ${name} by the prescribed method (${shown(prescribed)}) differs from the full model (${shown(best)}) by more than the tolerance: a remark on the method, not on the students.`,
  ];
}
