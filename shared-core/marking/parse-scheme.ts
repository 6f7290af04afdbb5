import { z } from 'zod';
import { quantityKeys } from '../units/types.ts';
import type { MarkingScheme } from './types.ts';

/** A scheme that was understood, or every fault of it in a sentence. */
export type ParseSchemeOutcome =
  | { readonly ok: true; readonly scheme: MarkingScheme }
  | { readonly ok: false; readonly problems: readonly string[] };

const positive = z.number().positive();
const pointsNumber = z.number().min(0).max(1000);
const tolerance = z.union(
  [
    z.strictObject({ absolute: positive }),
    z.strictObject({ relative: positive }),
    z.strictObject({ sigmas: positive }),
  ],
  { error: 'a tolerance is {"absolute": …}, {"relative": …} or {"sigmas": …} with a positive number' },
);
const isotopologueName = z
  .string()
  .regex(/^\d*[A-Z][a-z]?\d*[A-Z][a-z]?$/, 'an isotopologue is written like H35Cl, D37Cl or 12C16O');
const method = z.discriminatedUnion('fit', [
  z
    .strictObject({
      fit: z.literal('polynomial'),
      degree: z.union([z.literal(1), z.literal(2), z.literal(3), z.literal(4)]),
      distortion: z.enum(['tied', 'free']).optional(),
    })
    .refine((m) => m.distortion !== 'free' || m.degree === 4, {
      error: 'D free needs the term in m⁴, that is degree 4',
    }),
  z.strictObject({
    fit: z.literal('combination-differences'),
    intercept: z.boolean().default(false),
    cubicTerm: z.boolean().default(false),
  }),
  z.strictObject({ fit: z.literal('successive-differences') }),
  z.strictObject({ fit: z.literal('single-branch'), branch: z.enum(['P', 'R']) }),
  z.strictObject({ fit: z.literal('midpoint') }),
]);
const lineRule = z.discriminatedUnion('rule', [
  z.strictObject({ rule: z.literal('any') }),
  z.strictObject({ rule: z.literal('up-to'), m: z.int().min(2).max(100) }),
]);
const quantityRule = z.strictObject({
  key: z.enum(quantityKeys),
  isotopologues: z.array(isotopologueName).optional(),
  unit: z.string().min(1),
  full: tolerance,
  part: tolerance.nullable().default(null),
  partCredit: z.enum(['stepped', 'sliding']).optional(),
  points: pointsNumber,
  leastFigures: z.int().min(1).max(12).nullable().default(null),
  uncertaintyWanted: z.boolean().optional(),
  tellApart: z.array(z.string()).default([]),
});
const schema = z.strictObject({
  version: z.literal(1),
  title: z.string().default(''),
  isotopologues: z.array(isotopologueName).min(1),
  masses: z.enum(['isotopic', 'average', 'nuclear']).default('isotopic'),
  methods: z.array(method).min(1),
  lines: lineRule.default({ rule: 'any' }),
  bondLengthFrom: z.enum(['Be', 'B0', 'B1']).default('Be'),
  forceConstantFrom: z.enum(['omegaE', 'nu0']).default('nu0'),
  anharmonicityFrom: z.enum(['overtone', 'isotope-pair', 'given']).nullable().default(null),
  anharmonicityPerCm: positive.nullable().default(null),
  quantities: z.array(quantityRule).min(1),
  handItems: z.array(z.strictObject({ title: z.string().min(1), points: pointsNumber })).default([]),
  readingErrorPerCm: positive.nullable().default(null),
  carryForward: z.boolean().default(true),
  oncePerCause: z.boolean().default(true),
  attempts: z.enum(['latest', 'best']).default('latest'),
  due: z.iso.datetime({ offset: true }).nullable().default(null),
  lateness: z
    .strictObject({
      graceHours: z.number().min(0),
      pointsPerDay: z.number().min(0),
      mostPoints: z.number().min(0),
    })
    .nullable()
    .default(null),
});

/**
 * Reads a marking scheme from parsed JSON (scheme.json, version 1).
 *
 * @param json any value. @returns the scheme with defaults filled in, or every problem as a sentence that names the place.
 */
export function parseScheme(json: unknown): ParseSchemeOutcome {
  const result = schema.safeParse(json);
  if (!result.success) {
    return {
      ok: false,
      problems: result.error.issues.map((issue) => `${place(issue.path)}: ${issue.message}.`),
    };
  }
  const scheme = result.data as MarkingScheme;
  const problems = inconsistencies(scheme);
  return problems.length > 0 ? { ok: false, problems } : { ok: true, scheme };
}

function inconsistencies(scheme: MarkingScheme): string[] {
  const problems: string[] = [];
  if (scheme.anharmonicityFrom === 'given' && scheme.anharmonicityPerCm === null) {
    problems.push('anharmonicityPerCm: ωexe is to be taken as given, but no value is given.');
  }
  const seen = new Set<string>();
  scheme.quantities.forEach((rule, i) => {
    for (const isotopologue of rule.isotopologues?.length ? rule.isotopologues : ['*']) {
      const id = `${rule.key} of ${isotopologue}`;
      if (seen.has(id)) problems.push(`quantities[${i}]: ${rule.key} is asked for twice.`);
      seen.add(id);
    }
    for (const kind of ['absolute', 'relative', 'sigmas'] as const) {
      const full = (rule.full as Partial<Record<string, number>>)[kind];
      const part = (rule.part as Partial<Record<string, number>> | null)?.[kind];
      if (full !== undefined && part !== undefined && part < full) {
        problems.push(
          `quantities[${i}].part: the range for part credit of ${rule.key} is narrower than that for full credit.`,
        );
      }
    }
  });
  return problems;
}

function place(path: readonly PropertyKey[]): string {
  const text = path.map((p) => (typeof p === 'number' ? `[${p}]` : `.${String(p)}`)).join('');
  return text === '' ? 'scheme' : text.replace(/^\./, '');
}
