import { lineWavenumberPerCm } from '../../molecule/index.ts';
import { fitRegion, type RegionFit } from './fit-region.ts';
import type { RegionProblem } from './region-problem.ts';
import { correlatedCovariance } from './influence.ts';
import { foreignRanges, lineDistances, pointResiduals, robustSigma } from './foreign.ts';
import { constantKeys, isMerged } from './layout.ts';
import { linePositions } from './line-positions.ts';
import { naturalPartners } from './natural-partners.ts';
import { blackStart, sharpStart, startRegion } from './region-start.ts';
import type { ForwardBand, ForwardFit, ForwardInput, ForwardOutcome } from './types.ts';
import { whiteningFilter } from './whiten.ts';

/** Room beside the outermost lines of a region, in line widths and in cm-1. */
const padWidths = 8;
const padPerCm = 6;
/** Steps after which a start with side lobes must be ahead of the one without. */
const sharpTrial = 6;
/**
 * σ of the centre of a merged doublet in units of its splitting: stray light or a clipped floor changes how black its partners look,
 * and with it their shares, by some per cent.
 */
const mergedCentreShare = 0.015;

/**
 * Constants of bands from the raw points: lines of Beer and Lambert → instrument → transmittance × local baseline, all fitted at once.
 *
 * Bands must overlap or follow one another (isotopologues of one band); bands far apart are fitted by calls of their own. Noise that
 * is correlated (zero filling, weighting of the interferogram) is whitened by an autoregressive filter taken from the residuals of a
 * first pass; σ comes from the residuals.
 *
 * @returns constants with joint covariance and single lines, or why there is none.
 */
export function fitWholeSpectrum(input: ForwardInput): ForwardOutcome {
  const { prepared } = input;
  const bands = [...input.bands, ...naturalPartners(prepared, input.bands)];
  const positions = input.bands.flatMap((b) => b.ms.map((m) => lineWavenumberPerCm(b.constants, m)));
  if (positions.length < 4)
    return { outcome: 'too-few-lines', reason: `${positions.length} lines are too few for a band` };
  const width = prepared.resolutionPerCm ?? 4 * prepared.stepPerCm;
  const pad = padWidths * width + padPerCm;
  const problem = startRegion(prepared, bands, [Math.min(...positions) - pad, Math.max(...positions) + pad]);
  if (problem.data.observed.length < problem.maps.length + 10) {
    return { outcome: 'too-few-lines', reason: 'the points of the band are fewer than what describes it' };
  }
  const weights = problem.data.weights.slice();
  const plain = Float64Array.of(1);
  let first = fitRegion(problem, problem.start, weights, plain, 16);
  if (first.chiSquared > 1.2 * problem.data.observed.length) {
    // Side lobes make every step dear: a few show whether this instrument is the better one.
    const other = fitRegion(problem, sharpStart(prepared, problem), weights, plain, sharpTrial);
    if (other.chiSquared < first.chiSquared) first = fitRegion(problem, other.state, weights, plain, 10);
  }
  // Merged partners: thin and black lines can look alike; the better one counts.
  if (bands.some(isMerged)) {
    const other = fitRegion(problem, blackStart(problem, first.state), weights, plain, 24);
    if (other.inverse.length > 0 && other.cost < first.cost) first = other;
  }
  if (first.inverse.length === 0)
    return { outcome: 'rank-deficient', reason: 'the spectrum cannot tell the constants apart' };
  const leftOut = foreignRanges(problem, first, width);
  for (const [from, to] of leftOut) maskRange(problem, weights, from, to);
  const filter = filterFrom(problem, first, weights, prepared.noiseCorrelationPoints);
  const fit = fitRegion(problem, first.state, weights, filter, bands.some(isMerged) ? 32 : 20);
  if (fit.inverse.length === 0)
    return { outcome: 'rank-deficient', reason: 'the spectrum cannot tell the constants apart' };
  if (!fit.converged) return { outcome: 'not-converged', reason: 'the model of the spectrum did not settle' };
  const iterations = first.iterations + fit.iterations;
  return asked(result(problem, fit, weights, width, iterations, leftOut), input.bands.length, bands.length);
}

function maskRange(problem: RegionProblem, weights: Float64Array, from: number, to: number): void {
  problem.data.samplePerCm.forEach((x, i) => {
    if (x >= from && x <= to) weights[i] = 0;
  });
}

function filterFrom(
  problem: RegionProblem,
  fit: RegionFit,
  weights: Float64Array,
  correlationPoints: number,
): Float64Array {
  const z = pointResiduals(problem, fit);
  const present = Uint8Array.from(z, (v, i) => (weights[i]! > 0 && Math.abs(v) < 6 * 3 ? 1 : 0));
  const order = Math.min(24, Math.max(6, Math.round(5 * correlationPoints)));
  return whiteningFilter(z, present, order, 0.02);
}

/** σ of the whitened residuals near lines and everywhere: where the model misfits, it does so on the lines. */
function misfitOf(
  problem: RegionProblem,
  fit: RegionFit,
  weights: Float64Array,
  width: number,
): { all: number; lines: number } {
  const distance = lineDistances(problem, fit, width);
  let [sum, n, sumLines, nLines] = [0, 0, 0, 0];
  fit.residual.values.forEach((v, i) => {
    if (weights[i] === 0) return;
    sum += v * v;
    n++;
    if (distance[i]! < 1) {
      sumLines += v * v;
      nLines++;
    }
  });
  const parameters = problem.maps.length;
  const share = nLines > 0 ? Math.min(0.9, parameters / nLines) : 0;
  return {
    all: Math.sqrt(sum / Math.max(1, n - parameters)),
    lines: nLines > 0 ? Math.sqrt(sumLines / (nLines * (1 - share))) : 0,
  };
}

function result(
  problem: RegionProblem,
  fit: RegionFit,
  weights: Float64Array,
  width: number,
  iterations: number,
  leftOut: readonly (readonly [number, number])[],
): ForwardFit {
  const { all, lines } = misfitOf(problem, fit, weights, width);
  // What the correlation makes of σ comes from the influences; a misfit on the lines goes on top.
  const misfit = all > 0 ? Math.max(1, lines / all) : 1;
  const correlated = correlatedCovariance(problem, fit, weights);
  const beside = robustSigma(pointResiduals(problem, fit), (i) => weights[i]! > 0);
  const meanNoise = median(problem.data.weights.filter((w) => w > 0).map((w) => 1 / w));
  return {
    outcome: 'converged',
    constants: fit.state.constants,
    covariance: constantsCovariance(problem, correlated.ofConstants, misfit),
    lines: linePositions(problem, fit, width, correlated.factor * misfit),
    instrument: {
      maximumPathDifferenceCm: fit.state.pathDifferenceCm,
      q1: fit.state.q1,
      q2: fit.state.q2,
      lorentzHalfWidthPerCm: fit.state.lorentzHalfWidthPerCm,
    },
    noise: beside * meanNoise,
    misfit,
    iterations,
    leftOutPerCm: leftOut,
  };
}

/** The result without the bands that only stood in the background. */
function asked(fit: ForwardFit, count: number, all: number): ForwardFit {
  const n = 5 * count;
  const covariance = Float64Array.from(
    { length: n * n },
    (_, k) => fit.covariance[Math.floor(k / n) * 5 * all + (k % n)]!,
  );
  const lines = fit.lines.filter((l) => l.bandIndex < count);
  return { ...fit, constants: fit.constants.slice(0, count), covariance, lines };
}

const median = (values: Float64Array): number => values.toSorted()[values.length >> 1] ?? 0;

/** Joint covariance of the constants of all bands; a follower moves with its leader. */
function constantsCovariance(problem: RegionProblem, fitted: Float64Array, scale: number): Float64Array {
  const fittedCount = problem.layout.constants.length;
  const n = 5 * problem.bands.length;
  // Rows of the derivative of all constants by the fitted ones.
  const rows: { at: number; coefficient: number }[][] = Array.from({ length: n }, () => []);
  problem.layout.constants.forEach((constant, at) => {
    for (const which of constant.which) rows[5 * constant.bandIndex + which]!.push({ at, coefficient: 1 });
    problem.bands.forEach((band, i) => {
      if (band.follows?.leader !== constant.bandIndex) return;
      for (const which of constant.which)
        rows[5 * i + which]!.push({ at, coefficient: followRatio(problem.bands, i, which) });
    });
  });
  const covariance = new Float64Array(n * n);
  for (let i = 0; i < n; i++) {
    for (let j = 0; j < n; j++) {
      let sum = 0;
      for (const a of rows[i]!)
        for (const b of rows[j]!) sum += a.coefficient * b.coefficient * fitted[a.at * fittedCount + b.at]!;
      covariance[i * n + j] = sum * scale * scale;
    }
  }
  problem.bands.forEach((band, i) => {
    if (!isMerged(band)) return;
    const { leader } = band.follows!;
    const splitting = band.constants.bandOriginPerCm - problem.bands[leader]!.constants.bandOriginPerCm;
    const variance = (mergedCentreShare * splitting) ** 2;
    for (const a of [i, leader]) for (const b of [i, leader]) covariance[5 * a * n + 5 * b]! += variance;
  });
  return covariance;
}

function followRatio(bands: readonly ForwardBand[], i: number, which: number): number {
  if (which === 0) return 1;
  const key = constantKeys[which]!;
  const leader = bands[bands[i]!.follows!.leader]!.constants[key];
  return leader === 0 ? 1 : bands[i]!.constants[key] / leader;
}
