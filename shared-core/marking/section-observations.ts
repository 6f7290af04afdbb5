import type { FileReference } from '../reference/types.ts';
import { copyingAdvice } from './observations.ts';
import { slipNamed } from './slips/catalogue.ts';
import { shown } from './slips/numbers.ts';
import type { MarkedSubmission, SectionObservation } from './types.ts';

/** Two files that hold the same measurement. */
export interface RepeatedSpectrum {
  readonly files: readonly [string, string];
  /** How they are equal: "byte for byte", "after scaling", … */
  readonly how: string;
  readonly figures: Readonly<Record<string, number>>;
}

/** A signature shared by this share of a section (and by at least three) points at the handout. */
const sharedFrom = 1 / 3;
const fewestSharing = 3;
/** Axis scales below this are ordinary; those within this distance of each other count as the same. */
const axisScaleFromPpm = 30;
const sameAxisScalePpm = 25;

/** What shows only across the submissions of a section. */
export function sectionObservations(
  submissions: readonly MarkedSubmission[],
  referencesByFile: ReadonlyMap<string, FileReference>,
  repeated: readonly RepeatedSpectrum[],
): SectionObservation[] {
  return [
    ...sharedSlips(submissions),
    ...axisScale(referencesByFile),
    ...outlyingSpectra(referencesByFile),
    ...repeatedSpectra(submissions, repeated),
    ...repeatedValues(submissions),
  ];
}

function sharedSlips(submissions: readonly MarkedSubmission[]): SectionObservation[] {
  const judged = submissions.filter((s) => s.values.some((v) => v.deviation !== null));
  const byCode = new Map<string, MarkedSubmission[]>();
  for (const s of judged) {
    for (const code of new Set(s.slips.filter((f) => f.probability >= 0.3).map((f) => f.code))) {
      byCode.set(code, [...(byCode.get(code) ?? []), s]);
    }
  }
  return [...byCode].flatMap(([code, who]) =>
    who.length < fewestSharing || who.length < sharedFrom * judged.length
      ? []
      : [
          {
            code: 'shared-slip',
            files: [],
            students: who.map((s) => s.submission.student),
            text: `${who.length} of ${judged.length} submissions show the same slip, ${code} (${slipNamed(code)?.what ?? code}). When so many share one slip, the handout is the first suspect.`,
            figures: { share: who.length / judged.length, submissions: who.length },
          },
        ],
  );
}

function axisScale(referencesByFile: ReadonlyMap<string, FileReference>): SectionObservation[] {
  const scales = [...referencesByFile]
    .flatMap(([file, r]) =>
      r.axisScalePpm === null || r.reliability === 'none' ? [] : [{ file, ppm: r.axisScalePpm }],
    )
    .filter(({ ppm }) => Math.abs(ppm) >= axisScaleFromPpm)
    .sort((a, b) => a.ppm - b.ppm);
  const groups: { file: string; ppm: number }[][] = [];
  for (const one of scales) {
    const last = groups.at(-1);
    if (last !== undefined && one.ppm - last[0]!.ppm <= sameAxisScalePpm) last.push(one);
    else groups.push([one]);
  }
  return groups.map((group) => {
    const ppm = median(group.map((g) => g.ppm));
    const files = group.map((g) => g.file).sort();
    return {
      code: 'axis-scale',
      files,
      students: [],
      text: `The wavenumber axis of ${files.length === 1 ? files[0]! : `${files.length} files`} is off by about ${shown(ppm, 2)} ppm against the published origin. It cancels in marking, since each value is held against its own file; the instrument may want a calibration.`,
      figures: { ppm, files: files.length },
    };
  });
}

/** Bond lengths must agree between files of one gas; one that stands apart deserves a look. */
function outlyingSpectra(referencesByFile: ReadonlyMap<string, FileReference>): SectionObservation[] {
  const byIsotopologue = new Map<string, { file: string; re: number }[]>();
  for (const [file, reference] of referencesByFile) {
    for (const [name, constants] of Object.entries(reference.isotopologues)) {
      const re = constants.re?.value;
      if (re === undefined || (reference.isotopologueReliability[name] ?? 'none') === 'none') continue;
      byIsotopologue.set(name, [...(byIsotopologue.get(name) ?? []), { file, re }]);
    }
  }
  return [...byIsotopologue].flatMap(([name, all]) => {
    if (all.length < 4) return [];
    const middle = median(all.map((a) => a.re));
    const scatter = 1.4826 * median(all.map((a) => Math.abs(a.re - middle)));
    const limit = Math.max(6 * scatter, 5e-4 * middle);
    return all
      .filter((a) => Math.abs(a.re - middle) > limit)
      .map((a) => ({
        code: 'outlying-spectrum',
        files: [a.file],
        students: [],
        text: `${a.file} gives re = ${shown(a.re)} pm for ${name}, the section's files ${shown(middle)} pm. Look at the reference, or at whether the file belongs here.`,
        figures: { rePm: a.re, medianPm: middle },
      }));
  });
}

function repeatedSpectra(
  submissions: readonly MarkedSubmission[],
  repeated: readonly RepeatedSpectrum[],
): SectionObservation[] {
  return repeated.flatMap(({ files, how, figures }) => {
    const owners = files.map((file) => submissions.filter((s) => s.submission.spectra.includes(file)));
    const shareRightly = owners[0]!.some((a) =>
      owners[1]!.some(
        (b) =>
          a.submission.student === b.submission.student ||
          (a.submission.group !== null && a.submission.group === b.submission.group),
      ),
    );
    if (shareRightly) return [];
    return [
      {
        code: 'spectrum-repeated',
        files: [...files],
        students: [...new Set(owners.flat().map((s) => s.submission.student))],
        text: `${files[0]} and ${files[1]} hold the same measurement (${how}). ${copyingAdvice}`,
        figures,
      },
    ];
  });
}

/** The same texts for at least four values from different files. */
function repeatedValues(submissions: readonly MarkedSubmission[]): SectionObservation[] {
  const byTexts = new Map<string, MarkedSubmission[]>();
  for (const s of submissions) {
    const given = s.values.filter((v) => v.submitted !== null && (v.figures ?? 0) >= 3);
    if (given.length < 4) continue;
    const id = JSON.stringify(given.map((v) => [v.isotopologue, v.quantity, v.text]).sort());
    byTexts.set(id, [...(byTexts.get(id) ?? []), s]);
  }
  return [...byTexts.values()].flatMap((who) => {
    const apart = who.filter((s, i) => who.findIndex((o) => sharesWork(o, s)) === i);
    if (apart.length < 2) return [];
    return [
      {
        code: 'values-repeated',
        files: [...new Set(who.flatMap((s) => s.submission.spectra))],
        students: who.map((s) => s.submission.student),
        text: `The same values, digit for digit, from different files: ${who.map((s) => s.submission.student).join(', ')}. ${copyingAdvice}`,
        figures: { submissions: who.length },
      },
    ];
  });
}

function sharesWork(a: MarkedSubmission, b: MarkedSubmission): boolean {
  const [x, y] = [a.submission, b.submission];
  return (
    x.student === y.student ||
    (x.group !== null && x.group === y.group) ||
    x.spectra.some((f) => y.spectra.includes(f))
  );
}

function median(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b);
  const middle = Math.floor(sorted.length / 2);
  return sorted.length % 2 === 1 ? sorted[middle]! : (sorted[middle - 1]! + sorted[middle]!) / 2;
}
