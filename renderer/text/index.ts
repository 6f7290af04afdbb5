import { chart } from './chart.ts';
import { common } from './common.ts';
import { exporting } from './export.ts';
import { intake } from './intake.ts';
import { keys } from './keys.ts';
import { references } from './references.ts';
import { review } from './review.ts';
import { scheme } from './scheme.ts';
import { sections } from './sections.ts';
import { terms } from './terms.ts';

export { fill, isotopologueText, plural } from './fill.ts';

/** Every English text of the window, in one place. */
export const text = {
  chart,
  common,
  exporting,
  intake,
  keys,
  references,
  review,
  scheme,
  sections,
  terms,
} as const;
