import type { QuantityKey, Reason } from '../units/types.ts';
import { askedOf, isotopologuesOf, valuesOf } from './asked.ts';
import type { ChosenSet } from './compare.ts';
import { isotopologue as isotopologueNamed } from '../molecule/isotopologue.ts';
import { checkAcrossIsotopologues } from './invariants.ts';
import { markValues } from './mark-values.ts';
import type { MarkedPart } from './marked-part.ts';
import { observationsOf } from './observations.ts';
import { answerKey, type NamedReference } from './prescribe.ts';
import { columnsSwapped } from './slips/columns-swapped.ts';
import { unavoidableReadingError } from './reading-floor.ts';
import { allFindings } from './slips/explain.ts';
import { weighSubmission } from './slips/weigh-submission.ts';
import { ownLinesOf } from './student-lines.ts';
import type {
  MarkedSubmission,
  MarkedValue,
  MarkingScheme,
  Observation,
  SlipFinding,
  Submission,
  SubmittedValue,
} from './types.ts';

export interface MarkOptions {
  /** Step of each file's abscissa in cm-1, by file name: sets the reading error that is expected of a student. */
  readonly stepPerCmOf?: (file: string) => number | null;
}

/**
 * Marks one submission: values against the answer key of its own files, points, slips, observations.
 *
 * Pure and independent of the order of values, lines and files. Points are null where no sound reference exists.
 *
 * @param references the file references of the submission's spectra, each with its file name; empty where none was matched.
 */
export function markSubmission(
  submission: Submission,
  references: readonly NamedReference[],
  scheme: MarkingScheme,
  options: MarkOptions = {},
): MarkedSubmission {
  return markInParts(submission, references, scheme, options).marked;
}

/** The same, with what the section-wide observations need. */
export function markInParts(
  submission: Submission,
  references: readonly NamedReference[],
  scheme: MarkingScheme,
  options: MarkOptions,
): { readonly marked: MarkedSubmission; readonly parts: readonly MarkedPart[] } {
  const main = references[0]?.reference ?? null;
  const isotopologues = isotopologuesOf(submission, scheme, main);
  const parts = isotopologues.map((isotopologue) =>
    markIsotopologue(submission, isotopologue, isotopologues, references, scheme, options),
  );
  const values = parts.flatMap((p) => p.values);
  const settled = values.filter((v) => v.points !== null);
  const source = parts.find((p) => p.key.source !== null)?.key.source ?? references[0] ?? null;
  const findings = parts.map((p) => (p.verdict === null ? [] : allFindings(p.verdict, p.key.isotopologue)));
  const marked: MarkedSubmission = {
    submission,
    spectrum: source?.file ?? null,
    reference: source?.reference ?? null,
    prescribed: Object.fromEntries(parts.map((p) => [p.key.isotopologue, p.prescribed])),
    values,
    slips: [...exchangedColumns(parts), ...findings.flat()],
    observations: [
      ...parts.flatMap((p, i) => {
        const submitted = valuesOf(submission, p.key.isotopologue, isotopologues);
        return observationsOf(p, submission, submitted, findings[i]!.length > 0, scheme);
      }),
      ...betweenIsotopologues(submission, isotopologues, scheme),
    ],
    points: settled.length === 0 ? null : round(settled.reduce((sum, v) => sum + (v.points ?? 0), 0)),
    of: round(values.reduce((sum, v) => sum + v.of, 0)),
    open: values.length - settled.length,
    remarks: remarksOf(submission, references),
  };
  return { marked, parts };
}

function markIsotopologue(
  submission: Submission,
  isotopologue: string,
  isotopologues: readonly string[],
  references: readonly NamedReference[],
  scheme: MarkingScheme,
  options: MarkOptions,
): MarkedPart {
  const key = answerKey(isotopologue, references, scheme, submission);
  const submitted = valuesOf(submission, isotopologue, isotopologues);
  const asked = askedOf(scheme, [isotopologue]);
  const ownLines = ownLinesOf(submission, isotopologue, isotopologues);
  const stepPerCm = key.source === null ? null : (options.stepPerCmOf?.(key.source.file) ?? null);
  const readingErrorPerCm = unavoidableReadingError(scheme, stepPerCm);
  const { values, chosen } = markValues(key, asked, submitted, scheme, ownLines, readingErrorPerCm);
  const best = bestOf(chosen);
  const verdict =
    best === null
      ? null
      : weighSubmission(key, submitted, references, scheme, {
          method: best.result.method,
          sets: best.result.span.sets.map((s) => s.set),
          asked: asked.map((a) => a.rule.key),
          originByMidpoint: originByMidpoint(values, chosen, best),
          stepPerCm,
          ownLines,
        });
  return { key, values, chosen, prescribed: key.methods.map((m) => m.span.constants), verdict };
}

/** Pairs of isotopologues whose values stand in each other's columns. */
function exchangedColumns(parts: readonly MarkedPart[]): SlipFinding[] {
  const weighed = parts.flatMap((p) =>
    p.verdict === null ? [] : [{ isotopologue: p.key.isotopologue, verdict: p.verdict.values }],
  );
  return weighed.flatMap((a, i) => weighed.slice(i + 1).flatMap((b) => columnsSwapped(a, b) ?? []));
}

/** I7: the isotopologues of one submission against each other. */
function betweenIsotopologues(
  submission: Submission,
  isotopologues: readonly string[],
  scheme: MarkingScheme,
): Observation[] {
  const of = (name: string): SubmittedValue[] => valuesOf(submission, name, isotopologues);
  return isotopologues.flatMap((a, i) =>
    isotopologues
      .slice(i + 1)
      .filter((b) => sameMolecule(a, b))
      .flatMap((b) =>
        checkAcrossIsotopologues(of(a), of(b), scheme)
          .filter((r) => !r.passed)
          .map((r) => ({
            code: 'isotopologues-disagree',
            quantities: r.quantities,
            text: `${a} and ${b}: ${r.text}`,
            figures: {
              low: r.interval[0],
              high: r.interval[1],
              expectedLow: r.expected[0],
              expectedHigh: r.expected[1],
            },
          })),
      ),
  );
}

/** H and D of the same partner count as one molecule. */
function sameMolecule(a: string, b: string): boolean {
  const gas = (name: string): string => (isotopologueNamed(name)?.gas ?? name).replace(/^D/, 'H');
  return gas(a) === gas(b);
}

/** The method that yields most of the values asked for, and under which they agree best. */
function bestOf(chosen: readonly ChosenSet[]): ChosenSet | null {
  const score = (c: ChosenSet): number =>
    c.comparisons.size + [...c.comparisons.values()].filter((x) => x.agreement === 'within').length;
  return chosen.reduce<ChosenSet | null>((a, b) => (a === null || score(b) > score(a) ? b : a), null);
}

function originByMidpoint(
  values: readonly MarkedValue[],
  chosen: readonly ChosenSet[],
  best: ChosenSet,
): boolean {
  if (best.result.method.fit === 'midpoint') return false;
  const midpoint = chosen.find((c) => c.result.method.fit === 'midpoint');
  const off = (c: ChosenSet | undefined, key: QuantityKey): number =>
    Math.abs(c?.comparisons.get(key)?.deviation ?? Infinity);
  return (
    midpoint !== undefined &&
    values.some((v) => v.quantity === 'nu0') &&
    off(midpoint, 'nu0') < off(best, 'nu0')
  );
}

function remarksOf(submission: Submission, references: readonly NamedReference[]): Reason[] {
  if (submission.spectra.length === 0)
    return [{ code: 'no-spectrum', text: 'No spectrum was matched to this submission.' }];
  const there = new Set(references.map((r) => r.file));
  return submission.spectra
    .filter((file) => !there.has(file))
    .map((file) => ({ code: 'spectrum-missing', text: `No reference was made from ${file}.` }));
}

function round(points: number): number {
  return Math.round(1e6 * points) / 1e6;
}
