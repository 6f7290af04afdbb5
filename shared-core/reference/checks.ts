import type { AssignedLine, RunnerUp } from '../assignment/types.ts';
import { bandConstantsFrom, publishedConstants } from '../molecule/index.ts';
import { bandParameters, type FittedBand } from './fitted-band.ts';
import { propagate } from './propagate.ts';
import type { ReferenceCheck } from './types.ts';
import { countsAsWrong, fewestLinesPerBranch, largestAxisScalePpm } from './wrong.ts';

const check = (
  code: string,
  figure: number,
  threshold: number,
  unit: string,
  text: string,
  passed = figure <= threshold,
): ReferenceCheck => ({ code, figure, threshold, unit, passed, text });

const equilibriumB = (p: readonly number[], n: number): number => p[1]! + (p[1]! - p[2]!) / (2 * n);
const alphaE = (p: readonly number[], n: number): number => (p[1]! - p[2]!) / n;

/** Three standard uncertainties of ν̃0, Be and αe against what would count as wrong. */
export function precisionChecks(band: FittedBand): ReferenceCheck[] {
  const p = bandParameters(band.constants);
  const n = band.upper;
  const be = propagate(p, band.covariance, (v) => equilibriumB(v, n));
  const alpha = propagate(p, band.covariance, (v) => alphaE(v, n));
  const origin3 = 3 * Math.sqrt(band.covariance[0]!);
  const be3 = (300 * (be.uncertainty ?? Infinity)) / Math.abs(be.value);
  const alpha3 = (300 * (alpha.uncertainty ?? Infinity)) / Math.abs(alpha.value);
  const name = `${band.isotopologue.name} ${band.band}`;
  return [
    check(
      'precision-origin',
      origin3,
      countsAsWrong.bandOriginPerCm,
      'cm-1',
      `${name}: three standard uncertainties of the band origin are ${origin3.toPrecision(2)} cm⁻¹.`,
    ),
    check(
      'precision-be',
      be3,
      100 * countsAsWrong.rotationalConstantRelative,
      '%',
      `${name}: three standard uncertainties of Be are ${be3.toPrecision(2)} %.`,
    ),
    check(
      'precision-alpha',
      alpha3,
      100 * countsAsWrong.alphaERelative,
      '%',
      `${name}: three standard uncertainties of αe are ${alpha3.toPrecision(2)} %.`,
    ),
  ];
}

/** Used lines in each branch: a band by one branch, or by few lines, hides a wrong numbering. */
export function lineChecks(band: FittedBand, lines: readonly AssignedLine[]): ReferenceCheck[] {
  const used = lines.filter(
    (l) => l.used && l.isotopologue === band.isotopologue.name && l.band === band.band,
  );
  const count = (branch: 'P' | 'R'): number => used.filter((l) => l.branch === branch).length;
  const [p, r] = [count('P'), count('R')];
  const name = `${band.isotopologue.name} ${band.band}`;
  const fewest = Math.min(p, r);
  const checks = [
    check(
      'few-lines',
      fewest,
      fewestLinesPerBranch,
      'lines',
      `${name}: ${p} P lines and ${r} R lines are used.`,
      fewest >= fewestLinesPerBranch || fewest === 0,
    ),
  ];
  if (fewest === 0)
    checks.push(
      check('one-branch', 0, 1, 'branch', `${name}: only the ${p > 0 ? 'P' : 'R'} branch is there.`, false),
    );
  return checks;
}

/** Pulls of the line positions (residual over uncertainty): near 1 where the model fits and the uncertainties are honest. */
export function pullCheck(band: FittedBand, lines: readonly AssignedLine[]): ReferenceCheck[] {
  const pulls = lines
    .filter(
      (l) =>
        l.used &&
        l.isotopologue === band.isotopologue.name &&
        l.band === band.band &&
        l.residualPerCm !== null,
    )
    .map((l) => l.residualPerCm! / l.uncertaintyPerCm);
  if (pulls.length < 6) return [];
  const rms = Math.hypot(...pulls) / Math.sqrt(pulls.length);
  return [
    check(
      'poor-fit',
      rms,
      5,
      'σ',
      `${band.isotopologue.name} ${band.band}: the lines scatter about the fit by ${rms.toPrecision(2)} times their own uncertainty.`,
    ),
  ];
}

/** Against the published constants of a listed gas: they say whether this can be the band at all, never what its constants are. */
export function plausibilityChecks(band: FittedBand): ReferenceCheck[] {
  const published = publishedConstants(band.isotopologue.name);
  if (published === null) return [];
  const expected = bandParameters(bandConstantsFrom(published, band.upper));
  const p = bandParameters(band.constants);
  const n = band.upper;
  const name = `${band.isotopologue.name} ${band.band}`;
  const ppm = axisScalePpm(band)!;
  const be = propagate(p, band.covariance, (v) => equilibriumB(v, n));
  const alpha = propagate(p, band.covariance, (v) => alphaE(v, n));
  const beOff = 100 * Math.abs(be.value / equilibriumB(expected, n) - 1);
  const alphaOff = 100 * Math.abs(alpha.value / alphaE(expected, n) - 1);
  const beLimit = 0.12 + (300 * (be.uncertainty ?? 0)) / be.value;
  const alphaLimit = 3 + (300 * (alpha.uncertainty ?? 0)) / Math.abs(alpha.value);
  return [
    check(
      'axis-scale',
      Math.abs(ppm),
      largestAxisScalePpm,
      'ppm',
      `${name}: the band origin stands ${ppm.toFixed(0)} ppm from the published one.`,
    ),
    check(
      'be-implausible',
      beOff,
      beLimit,
      '%',
      `${name}: Be differs from the published constant by ${beOff.toPrecision(2)} %, more than an instrument explains.`,
    ),
    check(
      'alpha-implausible',
      alphaOff,
      alphaLimit,
      '%',
      `${name}: αe differs from the published constant by ${alphaOff.toPrecision(2)} %, more than an instrument explains.`,
    ),
  ];
}

/** Scale of the wavenumber axis from the published origin, ppm; null for a gas that is not listed. */
export function axisScalePpm(band: FittedBand): number | null {
  const published = publishedConstants(band.isotopologue.name);
  if (published === null) return null;
  const expected = bandConstantsFrom(published, band.upper).bandOriginPerCm;
  return 1e6 * (band.constants.bandOriginPerCm / expected - 1);
}

/**
 * Centrifugal constant against D = 4Be³/ωe² (Kratzer); a fitted D lies about 2 % below the equilibrium one, hence the window of
 * 2.5 % about 0.98. ωe is the published one: its error of some 100 ppm does not matter here.
 */
export function kratzerCheck(band: FittedBand): ReferenceCheck[] {
  const published = publishedConstants(band.isotopologue.name);
  if (published === null || band.upper !== 1) return [];
  const p = bandParameters(band.constants);
  const d = propagate(p, band.covariance, (v) => (v[3]! + v[4]!) / 2);
  const expected = (4 * equilibriumB(p, 1) ** 3) / published.omegaEPerCm ** 2;
  const off = 100 * Math.abs(d.value / expected - 1);
  const limit = 4.5 + (300 * (d.uncertainty ?? 0)) / expected;
  return [
    check(
      'distortion-off',
      off,
      limit,
      '%',
      `${band.isotopologue.name} ${band.band}: D differs from 4Be³/ωe² by ${off.toPrecision(2)} %.`,
    ),
  ];
}

/** Isotopologues of one gas have one bond length: re agrees within 0.05 % and three standard uncertainties. */
export function pairChecks(bands: readonly FittedBand[]): ReferenceCheck[] {
  const fundamentals = bands.filter((b) => b.upper === 1 && !b.merged);
  const first = fundamentals[0];
  if (first === undefined) return [];
  const moment = (band: FittedBand): { value: number; relative: number } => {
    const be = propagate(bandParameters(band.constants), band.covariance, (v) => equilibriumB(v, 1));
    return {
      value: Math.sqrt(1 / (be.value * band.isotopologue.reducedMassU)),
      relative: (be.uncertainty ?? 0) / (2 * be.value),
    };
  };
  const a = moment(first);
  return fundamentals.slice(1).flatMap((band) => {
    if (!sameElements(first, band)) return [];
    const b = moment(band);
    const off = 100 * Math.abs(b.value / a.value - 1);
    const limit = 0.05 + 300 * Math.hypot(a.relative, b.relative);
    return [
      check(
        'pair-disagrees',
        off,
        limit,
        '%',
        `${first.isotopologue.name} and ${band.isotopologue.name} differ in re by ${off.toPrecision(2)} %.`,
      ),
    ];
  });
}

/** Odds of the next best reading of the same lines. */
export function runnerUpCheck(runnerUp: RunnerUp | null): ReferenceCheck[] {
  if (runnerUp === null) return [];
  return [
    check('ambiguous-assignment', runnerUp.odds, 1e-3, 'odds', `The next best reading: ${runnerUp.text}`),
  ];
}

/** H and D count as one element here: the pair H/D shares its bond length too. */
function sameElements(a: FittedBand, b: FittedBand): boolean {
  const elements = (band: FittedBand): string =>
    band.isotopologue.nuclides.map((x) => (x.element === 'D' ? 'H' : x.element)).join('-');
  return elements(a) === elements(b);
}
