import { choleskyFactor, choleskyInverse, choleskySolve } from '../../fitting/cholesky.ts';
import { normalEquations, whitened, type Column } from './columns.ts';
import { lowerBound } from './line-columns.ts';
import { addPriors, penaltyOf } from './priors.ts';
import type { RegionProblem } from './region-problem.ts';
import { baselineAt } from './region-data.ts';
import { modelState, stepped, type RegionState } from './region-state.ts';
import { modelTransmittance, transmittanceOnly, type ModelValues } from './transmittance.ts';

/** A step that gains less than this in χ² moves no constant by more than a tenth of its σ. */
const settled = 0.01;
/**
 * In a slow valley of the shape (width × strength of black lines) a lightly damped step that moves every constant by less than this
 * share of its σ is taken for the end; as many such steps as might follow go into σ.
 */
const settledShare = 0.15;
const stepsLeftOut = 10;
const lightDamping = 1e-2;

export interface RegionFit {
  readonly state: RegionState;
  /** Inverse of the normal matrix over the parameters, in the weights and the filter used. */
  readonly inverse: Float64Array;
  readonly chiSquared: number;
  /** χ² and what prior knowledge adds to it. */
  readonly cost: number;
  /** False where the last step still gained much: the minimum was not reached. */
  readonly converged: boolean;
  /** How far the constants may still be from a minimum at the end of a slow valley; null where it was reached. */
  readonly drift: Float64Array | null;
  readonly iterations: number;
  readonly values: ModelValues;
  /** Whitened basis columns and residual at the solution. */
  readonly columns: readonly Column[];
  readonly residual: Column;
}

function residualOf(
  problem: RegionProblem,
  transmittance: Float64Array,
  baseline: Float64Array,
  weights: Float64Array,
  filter: Float64Array,
): Column {
  const { observed } = problem.data;
  const difference = observed.map((y, i) => y - baseline[i]! * transmittance[i]!);
  return whitened({ start: 0, values: difference }, weights, filter);
}

const squared = (column: Column): number => column.values.reduce((sum, v) => sum + v * v, 0);

const penalty = (problem: RegionProblem, state: RegionState): number => penaltyOf(problem.priors, state);

/** Basis columns in the order of `parameterMaps`, times the baseline, whitened. */
function basisColumns(
  problem: RegionProblem,
  state: RegionState,
  values: ModelValues,
  baseline: Float64Array,
  weights: Float64Array,
  filter: Float64Array,
): Column[] {
  const times = (c: Column): Column => ({
    start: c.start,
    values: c.values.map((v, i) => v * baseline[c.start + i]!),
  });
  const whole = (v: Float64Array): Column => times({ start: 0, values: v });
  const columns = [
    ...values.byCentre.map(times),
    ...values.byStrength.map((c, i) =>
      times({ start: c.start, values: c.values.map((v) => v * state.strengths[i]!) }),
    ),
    // Width and path difference are fitted as logarithms: they stay positive, and a step is a factor.
    whole(values.byWidth.map((v) => v * state.lorentzHalfWidthPerCm)),
    whole(values.byPath.map((v) => v * state.pathDifferenceCm)),
    whole(values.byQ1),
    whole(values.byQ2),
    ...hats(problem, values.transmittance),
  ];
  return columns.map((c) => whitened(c, weights, filter));
}

function hats(problem: RegionProblem, transmittance: Float64Array): Column[] {
  const { knots, data } = problem;
  const spacing = knots[1]! - knots[0]!;
  return Array.from(knots, (knot) => {
    const start = lowerBound(data.samplePerCm, knot - spacing);
    const end = lowerBound(data.samplePerCm, knot + spacing);
    const values = Float64Array.from(
      { length: end - start },
      (_, i) =>
        Math.max(0, 1 - Math.abs(data.samplePerCm[start + i]! - knot) / spacing) * transmittance[start + i]!,
    );
    return { start, values };
  });
}

/**
 * Levenberg-Marquardt over all parameters of a region, with structured normal equations: each line touches only its neighbourhood.
 * The general solver of `fitting` would carry a dense Jacobian of some 3,500 × 110; this costs a hundredth of that.
 */
export function fitRegion(
  problem: RegionProblem,
  start: RegionState,
  weights: Float64Array,
  filter: Float64Array,
  maxIterations: number,
): RegionFit {
  const { layout, grid, data, maps } = problem;
  const np = maps.length;
  let state = start;
  const evaluate = (s: RegionState): { values: ModelValues; baseline: Float64Array } => ({
    values: modelTransmittance(modelState(layout, s), grid, data.samplePerCm),
    baseline: baselineAt(data.samplePerCm, problem.knots, s.baseline),
  });
  const trial = (s: RegionState): Column =>
    residualOf(
      problem,
      transmittanceOnly(modelState(layout, s), grid, data.samplePerCm.length),
      baselineAt(data.samplePerCm, problem.knots, s.baseline),
      weights,
      filter,
    );
  let current = evaluate(state);
  let residual = residualOf(problem, current.values.transmittance, current.baseline, weights, filter);
  let cost = squared(residual) + penalty(problem, state);
  let lambda = 1e-3;
  let converged = false;
  let lastGain = Infinity;
  let lastStep: { step: Float64Array; damping: number } | null = null;
  let iterations = 0;
  let columns = basisColumns(problem, state, current.values, current.baseline, weights, filter);
  let equations = withPriors(problem, state, normalEquations(columns, residual, maps));
  while (iterations < maxIterations && !converged) {
    iterations++;
    let accepted = false;
    for (let tries = 0; tries < 10 && !accepted; tries++) {
      const damped = equations.normal.slice();
      for (let i = 0; i < np; i++) damped[i * np + i]! *= 1 + lambda;
      const factor = choleskyFactor(damped, np);
      if (factor === null) {
        lambda = Math.max(lambda * 10, 1e-8);
        continue;
      }
      const step = choleskySolve(factor, equations.gradient, np);
      const candidate = stepped(layout, problem.bands, state, step, problem.limits);
      const nextResidual = trial(candidate);
      const nextCost = squared(nextResidual) + penalty(problem, candidate);
      if (nextCost <= cost * (1 + 1e-12)) {
        lastGain = cost - nextCost;
        converged = lastGain < settled + 1e-6 * cost;
        [state, residual, cost] = [candidate, nextResidual, nextCost];
        lastStep = { step, damping: lambda };
        lambda = Math.max(lambda / 10, 1e-9);
        accepted = true;
      } else lambda *= 10;
    }
    if (!accepted) {
      lastGain = 0;
      break;
    }
    current = evaluate(state);
    columns = basisColumns(problem, state, current.values, current.baseline, weights, filter);
    equations = withPriors(problem, state, normalEquations(columns, residual, maps));
  }
  const factor = choleskyFactor(equations.normal, np);
  const inverse = factor === null ? new Float64Array(0) : choleskyInverse(factor, np);
  // A gain of half a unit of χ² is far below the σ of the constants.
  const reached = lastGain < 0.5 + 1e-4 * cost;
  const drift = reached ? null : driftOf(lastStep, inverse, layout.constants.length, np);
  return {
    state,
    inverse,
    chiSquared: squared(residual),
    cost,
    converged: reached || drift !== null,
    drift,
    iterations,
    values: current.values,
    columns,
    residual,
  };
}

/** How far the constants may still go along a slow valley; null where the steps are not small. */
function driftOf(
  last: { step: Float64Array; damping: number } | null,
  inverse: Float64Array,
  constants: number,
  np: number,
): Float64Array | null {
  if (last === null || last.damping > lightDamping || inverse.length === 0) return null;
  const step = last.step.subarray(0, constants);
  const small = step.every((v, c) => Math.abs(v) < settledShare * Math.sqrt(inverse[c * np + c]!));
  return small ? step.map((v) => stepsLeftOut * v) : null;
}

function withPriors(
  problem: RegionProblem,
  state: RegionState,
  equations: { normal: Float64Array; gradient: Float64Array },
): { normal: Float64Array; gradient: Float64Array } {
  addPriors(problem.priors, state, equations.normal, equations.gradient);
  return equations;
}
