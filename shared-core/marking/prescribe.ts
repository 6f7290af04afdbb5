import type { AssignedLine } from '../assignment/types.ts';
import { isotopologue as isotopologueNamed } from '../molecule/isotopologue.ts';
import type { Isotopologue } from '../molecule/types.ts';
import type { MethodExtra } from '../reference/methods/constants-by-method.ts';
import type { CandidateLine, KnownChoice } from '../reference/methods/line-sets.ts';
import { prescribedConstants, type MethodSpan } from '../reference/methods/prescribed-constants.ts';
import type { FileReference, PrescribedMethod, Reliability } from '../reference/types.ts';
import type { MarkingScheme, Submission } from './types.ts';

/** A file reference with the name of the file it was made from. */
export interface NamedReference {
  readonly file: string;
  readonly reference: FileReference;
}

/** One accepted method, over the line sets of one file. */
export interface MethodResult {
  readonly method: PrescribedMethod;
  readonly span: MethodSpan;
}

/** The answer key of one isotopologue of one submission. */
export interface AnswerKey {
  readonly isotopologue: string;
  /** Null where the name is no isotopologue that the tables know. */
  readonly molecule: Isotopologue | null;
  /** File that holds its fundamental (or overtone alone); null where none does. */
  readonly source: NamedReference | null;
  readonly reliability: Reliability;
  /** Why there is none, where there is none. */
  readonly reason: string | null;
  readonly candidates: readonly CandidateLine[];
  readonly extra: MethodExtra;
  readonly methods: readonly MethodResult[];
}

const rank: Readonly<Record<Reliability, number>> = { sound: 2, check: 1, none: 0 };

/** Reliability of one isotopologue of a file. */
export function reliabilityOf(reference: FileReference, isotopologue: string): Reliability {
  return reference.isotopologueReliability[isotopologue] ?? 'none';
}

/**
 * The answer key of one isotopologue, from the files of one submission: every accepted method over the admissible line sets.
 *
 * @param references all files of the submission; the fundamental is taken from the most reliable one that shows it.
 */
export function answerKey(
  isotopologue: string,
  references: readonly NamedReference[],
  scheme: MarkingScheme,
  submission: Pick<Submission, 'lines' | 'lineCount' | 'isotopologue'>,
): AnswerKey {
  const molecule = isotopologueNamed(isotopologue);
  const showing = references
    .filter(({ reference }) => reference.isotopologues[isotopologue] !== undefined)
    .sort((a, b) => usefulness(b, isotopologue) - usefulness(a, isotopologue));
  const source = showing[0] ?? null;
  if (molecule === null || source === null || reliabilityOf(source.reference, isotopologue) === 'none') {
    return {
      isotopologue,
      molecule,
      source,
      reliability: 'none',
      reason:
        molecule === null
          ? `${isotopologue} is no isotopologue with known masses.`
          : whyNone(isotopologue, references),
      candidates: [],
      extra: {},
      methods: [],
    };
  }
  const fundamental = linesOfBand(source.reference, isotopologue, '1-0');
  const upper = fundamental.length > 0 ? 1 : 2;
  const candidates = upper === 1 ? fundamental : linesOfBand(source.reference, isotopologue, '2-0');
  const extra = { upper, ...beside(molecule, references, upper) };
  const choice = choiceOf(submission, isotopologue, scheme);
  return {
    isotopologue,
    molecule,
    source,
    reliability: reliabilityOf(source.reference, isotopologue),
    reason: null,
    candidates,
    extra,
    methods: scheme.methods.map((method) => ({
      method,
      span: prescribedConstants(candidates, method, scheme, molecule, scheme.lines, choice, extra),
    })),
  };
}

/** Lines of one band of one isotopologue, ready for a method. */
export function linesOfBand(reference: FileReference, isotopologue: string, band: string): CandidateLine[] {
  return reference.lines.filter((l) => l.isotopologue === isotopologue && l.band === band).map(candidate);
}

/** What is known of the student's own choice of lines. */
export function choiceOf(
  submission: Pick<Submission, 'lines' | 'lineCount' | 'isotopologue'>,
  isotopologue: string,
  scheme: MarkingScheme,
): KnownChoice {
  const unnamed = submission.isotopologue ?? scheme.isotopologues[0];
  const own = submission.lines.filter((l) => (l.isotopologue ?? unnamed) === isotopologue);
  if (own.length >= 3) return { known: 'lines', ms: own.map((l) => l.m) };
  if (submission.lineCount !== null) return { known: 'count', count: submission.lineCount };
  return { known: 'nothing' };
}

function candidate(line: AssignedLine): CandidateLine {
  return {
    m: line.m,
    wavenumberPerCm: line.wavenumberPerCm,
    uncertaintyPerCm: line.uncertaintyPerCm,
    used: line.used,
    blended: line.blended,
    saturated: line.saturated,
  };
}

function usefulness({ reference }: NamedReference, isotopologue: string): number {
  const fundamental = reference.lines.some((l) => l.isotopologue === isotopologue && l.band === '1-0');
  return rank[reliabilityOf(reference, isotopologue)] + (fundamental ? 10 : 0);
}

function beside(molecule: Isotopologue, references: readonly NamedReference[], upper: number): MethodExtra {
  const overtone = upper === 1 ? firstWithBand(molecule.name, references, '2-0') : null;
  const partnerName = otherHydrogen(molecule);
  const partner = partnerName === null ? null : firstWithBand(partnerName, references, '1-0');
  const partnerMolecule = partnerName === null ? null : isotopologueNamed(partnerName);
  return {
    ...(overtone === null ? {} : { overtone }),
    ...(partner === null || partnerMolecule === null
      ? {}
      : { partner: { isotopologue: partnerMolecule, lines: partner } }),
  };
}

function firstWithBand(
  isotopologue: string,
  references: readonly NamedReference[],
  band: string,
): CandidateLine[] | null {
  for (const { reference } of references) {
    if (reference.reliability === 'none') continue;
    const lines = linesOfBand(reference, isotopologue, band).filter((l) => l.used);
    if (lines.length > 0) return lines;
  }
  return null;
}

/** H35Cl for D35Cl and the reverse; null where there is no hydrogen. */
export function otherHydrogen(molecule: Isotopologue): string | null {
  if (molecule.name.startsWith('H')) return `D${molecule.name.slice(1)}`;
  if (molecule.name.startsWith('D')) return `H${molecule.name.slice(1)}`;
  return null;
}

function whyNone(isotopologue: string, references: readonly NamedReference[]): string {
  if (references.length === 0) return 'No spectrum was matched to this submission.';
  const files = references.map((r) => r.file).join(', ');
  const reasons = references.flatMap(({ reference }) =>
    [...(reference.isotopologueReasons[isotopologue] ?? []), ...reference.reasons].map((r) => r.text),
  );
  const shown = references.some(({ reference }) => reference.isotopologues[isotopologue] !== undefined);
  if (shown) return reasons[0] ?? `The reference for ${isotopologue} from ${files} is not reliable.`;
  const others = references.flatMap(({ reference }) => Object.keys(reference.isotopologues));
  if (others.length > 0) return `${files} shows no ${isotopologue} (found: ${others.join(', ')}).`;
  return reasons[0] ?? `Nothing could be assigned in ${files}.`;
}
