import type { Constants, FileReference, PrescribedConstants } from '../reference/types.ts';
import type { MarkedSubmission, MarkedValue, MarkingScheme, SectionObservation } from './types.ts';

/** Anything that JSON holds. */
export type Json = null | boolean | number | string | readonly Json[] | { readonly [key: string]: Json };

/**
 * The report of a section as report.json holds it (version 1): JSON-safe, keys as written in the table of formats.
 *
 * @param coreVersion version of the core that made the references.
 * @throws RangeError where a number is not finite: unknown must have become null before.
 */
export function reportJson(
  submissions: readonly MarkedSubmission[],
  observations: readonly SectionObservation[],
  scheme: MarkingScheme,
  coreVersion: string,
): Json {
  return jsonSafe({
    version: 1,
    core: coreVersion,
    scheme: scheme as unknown as Json,
    observations: observations.map(({ code, files, students, text, figures }) => ({
      code,
      files,
      students,
      text,
      figures,
    })),
    submissions: submissions.map(submissionJson),
  });
}

/** One submission as report.json holds it. */
export function submissionJson(marked: MarkedSubmission): Json {
  const { submission } = marked;
  return jsonSafe({
    student: submission.student,
    group: submission.group,
    attempt: submission.attempt,
    received: submission.received,
    isotopologue: submission.isotopologue,
    spectra: submission.spectra,
    spectrum: marked.spectrum,
    reference: submissionReferenceJson(marked),
    values: marked.values.map(valueJson),
    slips: marked.slips.map(({ code, probability, isotopologue, quantities, text, tellApart }) => ({
      code, probability: Math.round(1e4 * probability) / 1e4, isotopologue, quantities, text, tellApart,
    })), // prettier-ignore
    observations: marked.observations.map(({ code, quantities, text, figures }) => ({
      code,
      quantities,
      text,
      figures,
    })),
    remarks: marked.remarks.map(({ code, text }) => ({ code, text })),
    points: marked.points,
    of: marked.of,
    open: marked.open,
  });
}

/** The reference of a submission as report.json holds it: best estimate, prescribed constants, partners, lines. */
function submissionReferenceJson(marked: MarkedSubmission): Json {
  const { reference } = marked;
  if (reference === null) return null;
  const own = marked.submission.isotopologue;
  const main = own !== null && reference.isotopologues[own] !== undefined ? own : reference.isotopologue;
  return referenceJson(reference, main, main === null ? undefined : marked.prescribed[main]?.[0]);
}

/** A reference as report.json holds it, seen from one of its isotopologues (null: there is none). */
export function referenceJson(
  reference: FileReference,
  main: string | null,
  prescribed: PrescribedConstants | undefined,
): Json {
  const best = main === null ? reference.best : (reference.isotopologues[main] ?? reference.best);
  const others = Object.entries(reference.isotopologues).filter(([name]) => name !== main);
  return {
    reliability:
      (main === null ? undefined : reference.isotopologueReliability[main]) ?? reference.reliability,
    reasons: ((main === null ? undefined : reference.isotopologueReasons[main]) ?? reference.reasons).map(
      ({ code, text }) => ({ code, text }),
    ),
    axisScalePpm: reference.axisScalePpm,
    ordinate: reference.ordinate,
    isotopologue: main,
    best: constantsJson(best),
    prescribed: prescribedJson(prescribed),
    isotopologues: Object.fromEntries(others.map(([name, constants]) => [name, constantsJson(constants)])),
    runnerUp:
      reference.runnerUp === null ? null : { text: reference.runnerUp.text, odds: reference.runnerUp.odds },
    lines: reference.lines.map((l) => ({
      id: l.id,
      isotopologue: l.isotopologue,
      band: l.band,
      branch: l.branch,
      jLower: l.jLower,
      wavenumberPerCm: l.wavenumberPerCm,
      uncertaintyPerCm: l.uncertaintyPerCm,
      used: l.used,
      residualPerCm: l.residualPerCm,
    })),
  };
}

function constantsJson(constants: Constants): Json {
  return Object.fromEntries(
    Object.entries(constants).map(([key, { value, uncertainty, unit }]) => [
      key,
      { value, uncertainty, unit },
    ]),
  );
}

function prescribedJson(prescribed: PrescribedConstants | undefined): Json {
  if (prescribed === undefined) return null;
  const values = Object.entries(prescribed.values).map(([key, { value, low, high, uncertainty, unit }]) => [
    key,
    { value, low, high, uncertainty, unit },
  ]);
  return { method: prescribed.method, ...(Object.fromEntries(values) as Record<string, Json>) };
}

function valueJson(value: MarkedValue): Json {
  const { isotopologue, quantity, text, submitted, uncertainty, figures, unit, agreement, reason } = value;
  const { deviation, method, carriedForward, points, of } = value;
  return {
    isotopologue, quantity, text, submitted, uncertainty, figures, unit, agreement, reason,
    deviation, method, carriedForward, points, of,
  }; // prettier-ignore
}

function jsonSafe<T extends Json>(value: T): T {
  if (typeof value === 'number' && !Number.isFinite(value)) {
    throw new RangeError(`report: ${value} is no finite number; unknown values must be null`);
  }
  if (Array.isArray(value)) value.forEach((v) => jsonSafe(v as Json));
  else if (value !== null && typeof value === 'object') Object.values(value).forEach((v) => jsonSafe(v));
  return value;
}
