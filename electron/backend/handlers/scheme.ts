import type { SchemeChange, SchemeCheck } from '../../../shared-core/contract/index.ts';
import { AppError } from '../../../shared-core/contract/index.ts';
import { markingPreview } from '../../../shared-core/marking/marking-preview.ts';
import { parseScheme } from '../../../shared-core/marking/parse-scheme.ts';
import { schemeOutlook } from '../../../shared-core/marking/scheme-outlook.ts';
import {
  starterSchemeFor,
  starterVariants,
  type StarterVariant,
} from '../../../shared-core/marking/starter-scheme.ts';
import { changed, mustExist, note, type Handlers } from './handler.ts';

function check(json: unknown): SchemeCheck {
  const parsed = parseScheme(json);
  if (!parsed.ok) return { problems: parsed.problems, warnings: [], outlook: [] };
  const outlook = schemeOutlook(parsed.scheme);
  return {
    problems: [],
    warnings: outlook.flatMap((o) => o.warnings.map((text) => ({ code: 'scheme', text }))),
    outlook: outlook.flatMap((o) =>
      o.value === null || o.unit === null
        ? []
        : [
            {
              isotopologue: o.isotopologue,
              quantity: o.quantity,
              value: o.value,
              low: o.low ?? o.value,
              high: o.high ?? o.value,
              best: o.best,
              unit: o.unit,
            },
          ],
    ),
  };
}

/** Marking schemes. */
export const schemeHandlers: Handlers<'scheme.starters' | 'scheme.check' | 'scheme.preview' | 'scheme.save'> =
  {
    'scheme.starters': () =>
      Promise.resolve(
        (Object.keys(starterVariants) as StarterVariant[]).map((name) => ({
          name,
          scheme: starterSchemeFor(name),
        })),
      ),
    'scheme.check': (_, { scheme }) => Promise.resolve(check(scheme)),
    'scheme.preview': async (context, { sectionId, scheme }) => {
      await mustExist(context, sectionId);
      const parsed = parseScheme(scheme);
      if (!parsed.ok) return { problems: parsed.problems, changes: [] };
      const [before, after] = await Promise.all([
        context.marks.of(sectionId),
        context.marks.under(sectionId, parsed.scheme),
      ]);
      const names = new Map(before.stored.map((s) => [s.submission.student, s.submission.name]));
      const changes = markingPreview(before.marked.submissions, after.marked.submissions).map(
        (c): SchemeChange => ({
          student: c.student,
          name: names.get(c.student) ?? null,
          before: c.pointsBefore,
          after: c.pointsAfter,
          why: c.changes.map((v) => v.text).join(' '),
        }),
      );
      return { problems: [], changes };
    },
    'scheme.save': async (context, { sectionId, scheme }) => {
      await mustExist(context, sectionId);
      const parsed = parseScheme(scheme);
      if (!parsed.ok) throw new AppError('bad-input', parsed.problems.join(' '));
      const version = await context.store.call('saveScheme', {
        note: note(context, sectionId, `saved the marking scheme “${parsed.scheme.title}”`),
        document: JSON.stringify(parsed.scheme),
      });
      changed(context, sectionId, 'marks');
      return { version };
    },
  };
