import { relativeLineStrength } from '../../molecule/index.ts';
import type { PreparedSpectrum } from '../../spectrum/types.ts';
import { fineGrid } from './grid.ts';
import { kernelReachPerCm } from './instrument.ts';
import { isMerged, lineCentres, makeLayout, parameterMaps } from './layout.ts';
import { makePriors } from './priors.ts';
import { baselineKnots, regionData } from './region-data.ts';
import type { RegionProblem } from './region-problem.ts';
import type { RegionState } from './region-state.ts';
import type { ForwardBand } from './types.ts';

/** Starting instruments: q1 of the weighting, and path difference times line width (a raised cosine is 1/L wide, a boxcar 0.6/L). */
const smooth = { q1: 0.45, pathWidths: 1.05 };
const sharp = { q1: 0.02, pathWidths: 0.62 };

/** Lorentz half width of gases in teaching cells (common practice): around the first, hardly below the second. */
const commonLorentzPerCm = 0.05;
const leastLorentzPerCm = 0.012;

const roomTemperatureK = 296;

/** Spacing of the knots of the local baseline: wider than any line, narrower than a band's envelope. */
const knotSpacingPerCm = 40;

/**
 * The problem of one region: points, fine grid, starting values.
 *
 * The instrument starts between boxcar and raised cosine with the path difference that gives the observed width of a line.
 */
export function startRegion(
  prepared: PreparedSpectrum,
  bands: readonly ForwardBand[],
  range: readonly [number, number],
): RegionProblem {
  const data = regionData(prepared, range[0], range[1]);
  const width = prepared.resolutionPerCm ?? 4 * prepared.stepPerCm;
  const merged = bands.some(isMerged);
  // How black the lines are decides where a merged doublet stands: the gas is then narrower than the instrument shows.
  const lorentz = Math.max(merged ? Math.min(0.12 * width, commonLorentzPerCm) : 0.12 * width, 0.02);
  const limits = {
    lorentz: [merged ? leastLorentzPerCm : Math.max(width / 40, 0.004), 0.7 * width],
    path: [0.25 / width, Math.min(2.2 / width, 0.502 / prepared.stepPerCm)],
  } as const;
  const path = Math.min(limits.path[1], smooth.pathWidths / width);
  const knots = baselineKnots(data.samplePerCm, knotSpacingPerCm);
  const layout = makeLayout(bands, knots.length);
  const maps = parameterMaps(layout, bands);
  const margin =
    Math.min(60, kernelReachPerCm({ pathDifferenceCm: path, q1: 0.1, q2: 0 }, 2e-3)) + 10 * lorentz;
  const grid = fineGrid(
    data.samplePerCm,
    data.stepPerCm,
    merged ? 0.03 : Math.max(0.75 * lorentz, width / 25, 0.008),
    margin,
  );
  const constants = bands.map((b) => b.constants);
  const none = new Map<number, number>();
  const centres = lineCentres(layout, constants, none);
  const peaks = bands.flatMap((b) => [...b.peakAbsorbance]);
  // An unsaturated line of observed height A and width w holds about ln 10 · A · 1.1 w; a black one more, which the fit finds out.
  const strengths = Float64Array.from(peaks, (a) => Math.LN10 * Math.min(Math.max(a, 1e-4), 3) * 1.1 * width);
  layout.lines.forEach((line, i) => {
    if (line.strengthOf !== i) strengths[i] = strengths[line.strengthOf]! * line.strengthRatio;
  });
  const start: RegionState = {
    constants,
    freeCentres: new Map(layout.freeLines.map((i) => [i, centres[i]!])),
    strengths,
    lorentzHalfWidthPerCm: lorentz,
    pathDifferenceCm: path,
    q1: smooth.q1,
    q2: 0,
    baseline: new Float64Array(knots.length).fill(1),
  };
  const problem = { bands, layout, maps, data, knots, grid, limits, start };
  return { ...problem, priors: makePriors(problem) };
}

/** The same start with an instrument without weighting (side lobes). */
export function sharpStart(prepared: PreparedSpectrum, problem: RegionProblem): RegionState {
  const width = prepared.resolutionPerCm ?? 4 * prepared.stepPerCm;
  const path = Math.min(problem.limits.path[1], sharp.pathWidths / width);
  return { ...problem.start, pathDifferenceCm: path, q1: sharp.q1 };
}

/** Decadic absorbance at the strongest line's centre in the black start. */
const blackAbsorbance = 20;

/** A start with the same depths from lines that are black at their centres: strengths by the law, a narrower gas. */
export function blackStart(problem: RegionProblem, from: RegionState): RegionState {
  const { layout } = problem;
  const law = layout.lines.map((l) =>
    relativeLineStrength(from.constants[l.bandIndex]!, l.m, roomTemperatureK),
  );
  const strongest = Math.max(...layout.ownStrengths.map((i) => law[i]!));
  const strengths = from.strengths.slice();
  const widest = Math.max(...layout.ownStrengths.map((i) => from.strengths[i]!));
  // A black line's equivalent width is 2 √(S γ/π): half the thin one's strength leaves as much light.
  const gamma = Math.max(problem.limits.lorentz[0], widest / (2 * Math.sqrt(blackAbsorbance * Math.LN10)));
  for (const i of layout.ownStrengths)
    strengths[i] = (Math.PI * gamma * Math.LN10 * blackAbsorbance * law[i]!) / strongest;
  layout.lines.forEach((line, i) => {
    if (line.strengthOf !== i) strengths[i] = strengths[line.strengthOf]! * line.strengthRatio;
  });
  const lorentzHalfWidthPerCm = Math.min(problem.limits.lorentz[1], gamma);
  return { ...from, strengths, lorentzHalfWidthPerCm };
}
