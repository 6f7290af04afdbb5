import { assignmentSlips } from './catalogue-assignment.ts';
import { coefficientSlips } from './catalogue-coefficients.ts';
import { constantSlips } from './catalogue-constants.ts';
import { reportingSlips } from './catalogue-reporting.ts';
import { vibrationSlips } from './catalogue-vibration.ts';
import type { SlipDefinition } from './definition.ts';

/** The slip catalogue. Codes are stable; they appear in results and in stored decisions. */
export const slipCatalogue: readonly SlipDefinition[] = [
  ...assignmentSlips,
  ...coefficientSlips,
  ...vibrationSlips,
  ...constantSlips,
  ...reportingSlips,
];

const byCode = new Map(slipCatalogue.map((s) => [s.code, s]));

/** A slip by its code; undefined where the catalogue has none. */
export function slipNamed(code: string): SlipDefinition | undefined {
  return byCode.get(code);
}
