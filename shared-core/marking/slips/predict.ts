import {
  derive,
  standardSteps,
  type DeriveContext,
  type Step,
  type Values,
} from '../../reference/methods/derive.ts';
import type { QuantityKey } from '../../units/types.ts';
import type { SlipVariant, Steps } from './definition.ts';

/** Steps of a derivation with slips in it: those carried on, and those that touch only what is written down. */
export interface SlippedSteps {
  readonly carried: Readonly<Record<QuantityKey, Step>>;
  readonly alone: readonly Steps[];
}

export const unslipped: SlippedSteps = { carried: standardSteps, alone: [] };

/** Slips taken together on top of correct steps (or of steps that a method allows in their place). */
export function withSlips(
  base: Readonly<Record<QuantityKey, Step>>,
  variants: readonly Pick<SlipVariant, 'steps' | 'carried'>[],
): SlippedSteps {
  let carried = base;
  const alone: Steps[] = [];
  for (const { steps, carried: goesOn } of variants) {
    if (steps === undefined) continue;
    if (goesOn) carried = { ...carried, ...steps };
    else alone.push(steps);
  }
  return { carried, alone };
}

/** Every quantity as a student with these slips would hand it in, before rounding. */
export function predict(context: DeriveContext, slipped: SlippedSteps): Values {
  return slipped.alone.reduce(
    (values, steps) => writtenWith(values, steps, context),
    derive(context, slipped.carried),
  );
}

/** Values in which some are replaced by wrong ones that nothing else follows from. */
export function writtenWith(values: Values, steps: Steps, context: DeriveContext): Values {
  const changed: Values = { ...values };
  for (const key of Object.keys(steps) as QuantityKey[]) {
    const value = steps[key]!(values, context);
    if (value !== null && Number.isFinite(value)) changed[key] = value;
  }
  return changed;
}
