import type { BandConstants } from '../../molecule/types.ts';
import { constantKeys, followerConstants, lineCentres, type Layout } from './layout.ts';
import type { ModelState } from './transmittance.ts';
import type { ForwardBand } from './types.ts';

/** Everything that is fitted in one region. */
export interface RegionState {
  readonly constants: readonly BandConstants[];
  readonly freeCentres: ReadonlyMap<number, number>;
  readonly strengths: Float64Array;
  readonly lorentzHalfWidthPerCm: number;
  readonly pathDifferenceCm: number;
  readonly q1: number;
  readonly q2: number;
  /** Factor of the prepared baseline at each knot. */
  readonly baseline: Float64Array;
}

export function modelState(layout: Layout, state: RegionState): ModelState {
  return {
    centresPerCm: lineCentres(layout, state.constants, state.freeCentres),
    strengths: state.strengths,
    lorentzHalfWidthPerCm: state.lorentzHalfWidthPerCm,
    instrument: { pathDifferenceCm: state.pathDifferenceCm, q1: state.q1, q2: state.q2 },
  };
}

/** Limits of what an instrument and a gas can be; a step is shortened, never the result. */
export interface Limits {
  readonly lorentz: readonly [number, number];
  readonly path: readonly [number, number];
}

type MutableConstants = { -readonly [K in keyof BandConstants]: number };

const within = (value: number, [low, high]: readonly [number, number]): number =>
  Math.min(high, Math.max(low, value));

/** A factor of at most e in one step. */
const bounded = (logarithm: number): number => Math.min(1, Math.max(-1, logarithm));

/** The state after a step in the order of the parameters (see `parameterMaps`). */
export function stepped(
  layout: Layout,
  bands: readonly ForwardBand[],
  state: RegionState,
  step: Float64Array,
  limits: Limits,
): RegionState {
  let at = 0;
  const constants = state.constants.map((c): MutableConstants => ({ ...c }));
  for (const constant of layout.constants) {
    for (const which of constant.which) constants[constant.bandIndex]![constantKeys[which]!] += step[at]!;
    at++;
  }
  bands.forEach((band, i) => {
    if (band.follows !== undefined) {
      const { leader } = band.follows;
      constants[i] = followerConstants(band.constants, bands[leader]!.constants, constants[leader]!);
    }
  });
  const freeCentres = new Map(state.freeCentres);
  for (const i of layout.freeLines) freeCentres.set(i, freeCentres.get(i)! + step[at++]!);
  const strengths = state.strengths.slice();
  // Strengths are fitted as logarithms: light is absorbed, not made, and a black line depends on the logarithm.
  for (const i of layout.ownStrengths)
    strengths[i] = Math.max(strengths[i]! * Math.exp(bounded(step[at++]!)), 1e-7);
  layout.lines.forEach((line, i) => {
    if (line.strengthOf !== i) strengths[i] = strengths[line.strengthOf]! * line.strengthRatio;
  });
  const lorentz = within(state.lorentzHalfWidthPerCm * Math.exp(bounded(step[at++]!)), limits.lorentz);
  const path = within(state.pathDifferenceCm * Math.exp(bounded(step[at++]!)), limits.path);
  const q1 = within(state.q1 + step[at++]!, [-0.3, 0.8]);
  const q2 = within(state.q2 + step[at++]!, [-0.3, 0.3]);
  const baseline = state.baseline.map((b, k) => b + step[at + k]!);
  return {
    constants,
    freeCentres,
    strengths,
    lorentzHalfWidthPerCm: lorentz,
    pathDifferenceCm: path,
    q1,
    q2,
    baseline,
  };
}
