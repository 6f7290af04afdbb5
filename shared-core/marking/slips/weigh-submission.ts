import { publishedConstants } from '../../molecule/published-constants.ts';
import { derive, standardSteps, type Step, type Values } from '../../reference/methods/derive.ts';
import type { LineSet } from '../../reference/methods/line-sets.ts';
import type { MethodLine } from '../../reference/methods/method-line.ts';
import type { Isotopologue } from '../../molecule/types.ts';
import type { PrescribedMethod } from '../../reference/types.ts';
import type { QuantityKey } from '../../units/types.ts';
import type { AnswerKey, NamedReference } from '../prescribe.ts';
import { linesOfBand, otherHydrogen } from '../prescribe.ts';
import { otherHeavyOf } from '../published-lines.ts';
import type { MarkingScheme, SubmittedValue } from '../types.ts';
import { slipCatalogue } from './catalogue.ts';
import type { SlipSurroundings, SlipVariant } from './definition.ts';
import { fieldsOf, type Field } from './fields.ts';
import { readingErrorsAbout, unknownReadingErrors, type ReadingError } from './likelihood.ts';
import { lineTableVerdict, type LineTableVerdict } from './line-table.ts';
import { readingOf, representativeSets, groupsForReplays, withOneLine, type Reading } from './reading.ts';
import { weighSlips, type Verdict } from './weigh-slips.ts';
import { isotopologue as isotopologueNamed } from '../../molecule/isotopologue.ts';

/** What else is known when the slips of one isotopologue's values are weighed. */
export interface WeighOptions {
  /** Method under which the values agree best. */
  readonly method: PrescribedMethod;
  readonly sets: readonly LineSet[];
  /** Quantities that the scheme asks for. */
  readonly asked: readonly QuantityKey[];
  /** True where the origin was accepted as the midpoint of R(0) and P(1) beside another method. */
  readonly originByMidpoint: boolean;
  /** Step of the file's abscissa, cm-1; null where unknown. */
  readonly stepPerCm: number | null;
  /** The student's own lines, where a table was handed in: then nothing is left to reading. */
  readonly ownLines: readonly MethodLine[] | null;
}

/** The verdict on the values, and on the table of lines where there is one. */
export interface SubmissionVerdict {
  readonly values: Verdict;
  readonly lines: LineTableVerdict | null;
  /** True where the values were weighed as coming from the lines handed in. */
  readonly fromOwnLines: boolean;
}

/**
 * Weighs all slips against the values of one isotopologue; null where there is nothing to weigh.
 *
 * With a table of lines the chain starts from the student's own lines; where the values do not follow from them (a table that was not
 * the one fitted) it starts from the file's lines, whichever explains the values better.
 */
export function weighSubmission(
  key: AnswerKey,
  submitted: readonly SubmittedValue[],
  references: readonly NamedReference[],
  scheme: MarkingScheme,
  options: WeighOptions,
): SubmissionVerdict | null {
  const { molecule } = key;
  const fields = fieldsOf(submitted);
  if (molecule === null || options.sets.length === 0 || fields.length === 0) return null;
  const surroundings = surroundingsOf(key, molecule, references, scheme, options, fields.map((f) => f.key)); // prettier-ignore
  const from = (sets: readonly LineSet[], errors: readonly ReadingError[]): Verdict | null =>
    weighFrom(sets, errors, fields, key, molecule, scheme, options, surroundings);
  const { ownLines } = options;
  if (ownLines === null) {
    const values = from(options.sets, readingErrors(scheme, options));
    return values === null ? null : { values, lines: null, fromOwnLines: false };
  }
  const lines = lineTableVerdict(ownLines, key.candidates, surroundings, key.isotopologue);
  const own = from([{ label: 'the lines handed in', lines: ownLines }], tableErrors);
  if (own !== null && explainsAll(own)) return { values: own, lines, fromOwnLines: true };
  const file = from(options.sets, readingErrors(scheme, options));
  const ownIsBetter = own !== null && (file === null || topWeight(own) >= topWeight(file));
  const values = ownIsBetter ? own : file;
  return values === null ? null : { values, lines, fromOwnLines: ownIsBetter };
}

function explainsAll({ accounts }: Verdict): boolean {
  const top = accounts[0];
  return (
    top !== undefined &&
    top.unexplained.length === 0 &&
    top.hypothesis.free.size === 0 &&
    top.hypothesis.errors[0]!.perCm < 1
  );
}

function topWeight({ accounts }: Verdict): number {
  return accounts[0]?.logWeight ?? -Infinity;
}

function weighFrom(
  sets: readonly LineSet[],
  errors: readonly ReadingError[],
  fields: readonly Field[],
  key: AnswerKey,
  molecule: Isotopologue,
  scheme: MarkingScheme,
  options: WeighOptions,
  surroundings: SlipSurroundings,
): Verdict | null {
  const fitted = readingOf(representativeSets(sets), options.method, scheme, molecule, key.extra);
  if (fitted === null) return null;
  const oneLineReading = withOneLine(fitted, errors === tableErrors ? singleLinePerCm : 0);
  const reading = options.originByMidpoint ? oneLineReading : fitted;
  // Where the midpoint is accepted beside another method, both origins are correct work, whichever stands nearer.
  const midpointAccepted = scheme.methods.some((m) => m.fit === 'midpoint');
  const groups = groupsForReplays(sets);
  const known = new Map<SlipVariant, Map<number, Reading | null>>();
  const replayed = (variant: SlipVariant, group: number): Reading | null => {
    const readings = known.get(variant) ?? new Map<number, Reading | null>();
    known.set(variant, readings);
    const before = readings.get(group);
    if (before !== undefined) return before;
    const fresh = readingOf(groups[group]!, options.method, scheme, molecule, key.extra, variant.replay);
    readings.set(group, fresh);
    return fresh;
  };
  return weighSlips({
    fields,
    notGiven: options.asked.filter((k) => !fields.some((f) => f.key === k)),
    reading,
    oneLineReading,
    ways: slipCatalogue
      .filter((definition) => !(midpointAccepted && definition.code === 'origin-midpoint'))
      .map((definition) => ({ definition, variants: definition.variants(surroundings) })),
    alsoCorrect: midpointAccepted
      ? [options.originByMidpoint ? standardSteps : { ...standardSteps, nu0: midpointOrigin }]
      : [],
    groups: groups.length,
    replayed,
    errors,
    surroundings,
    steps: options.originByMidpoint ? { ...standardSteps, nu0: midpointOrigin } : standardSteps,
    handbook: handbookValues(molecule, scheme),
  });
}

/** How far a single line of a table stands from the fit through all of them, cm-1 (common practice). */
const singleLinePerCm = 0.1;

/** What is left of reading where the lines themselves were handed in: their rounding, or a fit to slightly other numbers. */
const tableErrors: readonly ReadingError[] = [
  { perCm: 1e-3, prior: 0.65 },
  { perCm: 1e-2, prior: 0.25 },
  { perCm: 0.1, prior: 0.1 },
];

/** ν̃0 by the midpoint lies αe below the fitted one. */
const midpointOrigin: Step = (_, { read, oneLine }) =>
  read.nu0 === undefined || read.B0 === undefined || read.Bn === undefined
    ? null
    : read.nu0 + read.Bn - read.B0 + Math.SQRT1_2 * (oneLine ?? 0);

/** The scheme's reading error; else about a third of the abscissa step; else the whole range from peak fit to ruler. */
function readingErrors(scheme: MarkingScheme, options: WeighOptions): readonly ReadingError[] {
  if (scheme.readingErrorPerCm !== null) return readingErrorsAbout(scheme.readingErrorPerCm);
  return options.stepPerCm === null ? unknownReadingErrors : readingErrorsAbout(options.stepPerCm / 3);
}

function surroundingsOf(
  key: AnswerKey,
  molecule: Isotopologue,
  references: readonly NamedReference[],
  scheme: MarkingScheme,
  options: WeighOptions,
  submitted: readonly QuantityKey[],
): SlipSurroundings {
  const numbers = options.sets.flatMap(({ lines }) => [
    lines.filter((l) => l.m > 0).length,
    lines.filter((l) => l.m < 0).length,
  ]);
  const published = publishedConstants(molecule.name);
  return {
    isotopologue: molecule,
    settings: scheme,
    method: options.method,
    submitted: new Set(submitted),
    linesASide: [...new Set(numbers)].filter((n) => n > 1).sort((a, b) => a - b),
    otherHeavy: showing(otherHeavyOf(molecule), references),
    otherLight: showing(otherHydrogen(molecule), references),
    overtone: key.extra.overtone ?? null,
    handbook:
      published === null ? null : { omegaE: published.omegaEPerCm, omegaExe: published.omegaExePerCm },
  };
}

function showing(
  name: string | null,
  references: readonly NamedReference[],
): { isotopologue: Isotopologue; lines: readonly MethodLine[] } | null {
  const molecule = name === null ? null : isotopologueNamed(name);
  if (name === null || molecule === null) return null;
  for (const { reference } of references) {
    const lines = linesOfBand(reference, name, '1-0');
    if (lines.length >= 6) return { isotopologue: molecule, lines };
  }
  return null;
}

/** Published constants of the isotopologue as a student would copy them, with what follows from them. */
export function handbookValues(molecule: Isotopologue, scheme: MarkingScheme): Values {
  const p = publishedConstants(molecule.name);
  if (p === null) return {};
  const { rotationalConstantEquilibriumPerCm: be, alphaEPerCm: alphaE } = p;
  const nu0 = p.omegaEPerCm - 2 * p.omegaExePerCm + 3.25 * p.omegaEyePerCm;
  const derived = derive({
    settings: scheme,
    reducedMassU: molecule.reducedMassU,
    upper: 1,
    read: { nu0, B0: be - alphaE / 2, Bn: be - 1.5 * alphaE, D: p.centrifugalConstantPerCm },
    overtone: null,
    partner: null,
  });
  return { ...derived, omegaE: p.omegaEPerCm, omegaExe: p.omegaExePerCm };
}
