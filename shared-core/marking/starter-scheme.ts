import type { QuantityKey } from '../units/types.ts';
import { fullShareOfMargin, marginOf } from './mistake-margins.ts';
import { unitOf } from '../reference/methods/constants-by-method.ts';
import type { MarkingScheme, QuantityRule, Tolerance } from './types.ts';

/** A quantity that a table of submitted values asks for. */
export interface AskedColumn {
  readonly key: QuantityKey;
  /** Unit as written; the standard unit where null. */
  readonly unit: string | null;
  /** Isotopologue that the column names; null: all. */
  readonly isotopologue: string | null;
}

interface Fair {
  readonly full: Tolerance;
  readonly part: Tolerance;
  readonly leastFigures: number;
  readonly tellApart: readonly string[];
}

const relative = (full: number, part: number, leastFigures: number, tellApart: readonly string[]): Fair => ({
  full: { relative: full },
  part: { relative: part },
  leastFigures,
  tellApart,
});

/** Fair tolerances for reading errors of 0.1 to 0.3 cm-1 on ten lines a side (common practice), before they are cut to the margin. */
const fair: Readonly<Record<QuantityKey, Fair>> = {
  nu0: {
    full: { absolute: 0.5 },
    part: { absolute: 1.5 },
    leastFigures: 5,
    tellApart: ['numbering-all-shift', 'origin-line'],
  },
  nu02: { full: { absolute: 0.5 }, part: { absolute: 1.5 }, leastFigures: 5, tellApart: [] },
  B0: relative(0.003, 0.01, 4, ['bbar-as-b0']),
  B1: relative(0.003, 0.01, 4, ['fields-swapped']),
  B2: relative(0.003, 0.01, 4, []),
  Be: relative(0.003, 0.01, 4, ['b0-as-be', 'be-plus-alpha']),
  alphaE: relative(0.03, 0.08, 3, ['alpha-half', 'alpha-double']),
  // Kratzer with a wrong B or ω moves D by 4 to 7 % only: told apart by the arithmetic, not by the tolerance.
  D: relative(0.15, 0.4, 2, []),
  omegaE: relative(0.001, 0.005, 5, ['omega-is-nu0', 'omega-lost-two']),
  omegaExe: relative(0.04, 0.1, 3, ['anharmonicity-double']),
  re: relative(0.002, 0.005, 4, ['r0-as-re']),
  r0: relative(0.002, 0.005, 4, []),
  k: relative(0.005, 0.02, 3, ['k-from-nu0', 'k-from-omega']),
  I: relative(0.003, 0.01, 4, []),
  mu: relative(0.0002, 0.001, 4, []),
  De: relative(0.05, 0.12, 3, ['dissociation-from-nu0']),
  D0: relative(0.05, 0.12, 3, ['dissociation-from-nu0']),
};

/**
 * A scheme to start from, for what the columns of a table ask: cubic in m, isotopic masses, r from Be, tolerances cut to the mistake
 * margin of every species asked for.
 *
 * @param columns quantities asked for; repeated ones are merged. @param isotopologues at least one.
 * @throws RangeError where there is no isotopologue or no quantity.
 */
export function starterScheme(
  columns: readonly AskedColumn[],
  isotopologues: readonly string[],
  title = 'Starter scheme',
): MarkingScheme {
  if (isotopologues.length === 0) throw new RangeError('isotopologues: expected at least one');
  if (columns.length === 0) throw new RangeError('columns: expected at least one quantity');
  const settings = starterSettings(columns, isotopologues);
  const empty: MarkingScheme = {
    version: 1,
    title,
    isotopologues: [...isotopologues],
    masses: 'isotopic',
    methods: [{ fit: 'polynomial', degree: 3, distortion: 'tied' }],
    lines: { rule: 'any' },
    bondLengthFrom: 'Be',
    ...settings,
    anharmonicityPerCm: null,
    quantities: [],
    handItems: [],
    readingErrorPerCm: null,
    carryForward: true,
    oncePerCause: true,
    attempts: 'latest',
    due: null,
    lateness: null,
  };
  // Margins look at what else is asked (values may stand in each other's place), so the rules start without tolerances cut.
  const rules = merged(columns);
  const uncut = { ...empty, quantities: rules.map((c) => ruleOf(c, empty)) };
  return { ...uncut, quantities: rules.map((c) => ruleOf(c, uncut)) };
}

/** Ready-made columns for the common variants of the experiment. */
export const starterVariants = {
  'HCl fundamental': { isotopologues: ['H35Cl'], keys: ['nu0', 'B0', 'B1', 'Be', 'alphaE', 'D', 're', 'k'] },
  'DCl fundamental': { isotopologues: ['D35Cl'], keys: ['nu0', 'B0', 'B1', 'Be', 'alphaE', 'D', 're', 'k'] },
  'HCl and DCl': { isotopologues: ['H35Cl', 'D35Cl'], keys: ['nu0', 'Be', 'alphaE', 'omegaE', 'omegaExe', 're', 'k'] },
  'HCl fundamental and overtone': { isotopologues: ['H35Cl'], keys: ['nu0', 'nu02', 'Be', 'alphaE', 'omegaE', 'omegaExe', 're', 'k'] },
  'CO fundamental': { isotopologues: ['12C16O'], keys: ['nu0', 'B0', 'B1', 'Be', 'alphaE', 're', 'k'] },
  'HBr fundamental': { isotopologues: ['H79Br'], keys: ['nu0', 'B0', 'B1', 'Be', 'alphaE', 're', 'k'] },
} as const satisfies Record<string, { isotopologues: readonly string[]; keys: readonly QuantityKey[] }>; // prettier-ignore

export type StarterVariant = keyof typeof starterVariants;

/** The starter scheme of a common variant. */
export function starterSchemeFor(variant: StarterVariant): MarkingScheme {
  const { isotopologues, keys } = starterVariants[variant];
  return starterScheme(
    keys.map((key) => ({ key, unit: null, isotopologue: null })),
    isotopologues,
    variant,
  );
}

function starterSettings(
  columns: readonly AskedColumn[],
  isotopologues: readonly string[],
): Pick<MarkingScheme, 'anharmonicityFrom' | 'forceConstantFrom'> {
  const keys = new Set(columns.map((c) => c.key));
  const wantsOmega = (['omegaE', 'omegaExe', 'De', 'D0'] as const).some((k) => keys.has(k));
  if (!wantsOmega && !keys.has('nu02')) return { anharmonicityFrom: null, forceConstantFrom: 'nu0' };
  const pair = isotopologues.some((i) => i.startsWith('H')) && isotopologues.some((i) => i.startsWith('D'));
  return {
    anharmonicityFrom: keys.has('nu02') || !pair ? 'overtone' : 'isotope-pair',
    forceConstantFrom: wantsOmega ? 'omegaE' : 'nu0',
  };
}

/** One entry per quantity: for all isotopologues where any column names none, else for those named. */
function merged(columns: readonly AskedColumn[]): AskedColumn[][] {
  const byKey = new Map<QuantityKey, AskedColumn[]>();
  for (const c of columns) byKey.set(c.key, [...(byKey.get(c.key) ?? []), c]);
  return [...byKey.values()];
}

function ruleOf(columns: readonly AskedColumn[], scheme: MarkingScheme): QuantityRule {
  const { key } = columns[0]!;
  const named = [...new Set(columns.flatMap((c) => c.isotopologue ?? []))];
  const all = columns.some((c) => c.isotopologue === null);
  const isotopologues = all || named.length === 0 ? scheme.isotopologues : named;
  const { full, part, leastFigures, tellApart } = fair[key];
  const margin = leastMargin(scheme, isotopologues, key, tellApart);
  return {
    key,
    ...(all || named.length === 0 ? {} : { isotopologues: named }),
    unit: columns.find((c) => c.unit !== null)?.unit ?? unitOf(key),
    full: cut(full, margin, 0.95 * fullShareOfMargin),
    part: cut(part, margin, 0.95),
    partCredit: 'stepped',
    points: 1,
    leastFigures,
    uncertaintyWanted: false,
    tellApart,
  };
}

function leastMargin(
  scheme: MarkingScheme,
  isotopologues: readonly string[],
  key: QuantityKey,
  codes: readonly string[],
): { absolute: number; relative: number } | null {
  const margins = isotopologues.map((i) => marginOf(scheme, i, key, codes));
  const known = margins.flatMap((m) =>
    m.absolute === null || m.relative === null ? [] : [{ absolute: m.absolute, relative: m.relative }],
  );
  return known.reduce<{ absolute: number; relative: number } | null>(
    (a, b) => (a === null || b.relative < a.relative ? b : a),
    null,
  );
}

function cut(
  tolerance: Tolerance,
  margin: { absolute: number; relative: number } | null,
  share: number,
): Tolerance {
  if (margin === null) return tolerance;
  if ('relative' in tolerance)
    return { relative: Math.min(tolerance.relative, roundDown(share * margin.relative)) };
  if ('absolute' in tolerance)
    return { absolute: Math.min(tolerance.absolute, roundDown(share * margin.absolute)) };
  return tolerance;
}

/** The largest of 1, 1.5, 2, 3, 4, 5, 7 × 10ⁿ that does not exceed the number. */
function roundDown(x: number): number {
  const power = 10 ** Math.floor(Math.log10(x));
  const mantissa = x / power;
  const nice = [7, 5, 4, 3, 2, 1.5, 1].find((n) => n <= mantissa + 1e-9) ?? 1;
  return Number((nice * power).toPrecision(3));
}
