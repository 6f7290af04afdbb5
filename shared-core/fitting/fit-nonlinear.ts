import { fitLinearWeighted } from './fit-linear-weighted.ts';
import type { FitOutcome } from './types.ts';

export interface NonlinearProblem {
  /** Model values at all data for given parameters. */
  readonly predict: (parameters: readonly number[]) => ArrayLike<number>;
  readonly observed: ArrayLike<number>;
  readonly sigmas: ArrayLike<number>;
  readonly start: readonly number[];
  /** Rows of ∂predict/∂parameter; absent: central differences. */
  readonly jacobian?: (parameters: readonly number[]) => readonly (readonly number[])[];
  /** As in the exact linear fit. Default 'input'. */
  readonly scale?: 'input' | 'residuals' | 'larger';
  /** Default 2000. */
  readonly maxIterations?: number;
}

/**
 * The one door to Levenberg-Marquardt: minimises Σ((y − f(β))/σ)², each damped step solved exactly by QR of the augmented, column-scaled
 * Jacobian, so that ill-conditioned problems keep their digits.
 *
 * General-purpose solvers at hand stop at an absolute error, square the condition number and give no covariance; this one reproduces
 * the NIST StRD nonlinear sets (see the tests). The structured fit of whole spectra has normal equations of its own.
 *
 * @returns values with covariance at the minimum, or why there is none. @throws RangeError where the model is not finite at the start.
 */
export function fitNonlinear(problem: NonlinearProblem): FitOutcome {
  const { observed, sigmas } = problem;
  const n = observed.length;
  const p = problem.start.length;
  if (n < p) return { outcome: 'too-few-lines', reason: `${n} data for ${p} parameters` };
  let parameters = [...problem.start];
  let residuals = residualsAt(problem, parameters);
  let cost = costOf(residuals, sigmas);
  if (!Number.isFinite(cost)) throw new RangeError('start: the model gives no finite number there');
  let lambda = 1e-3;
  const scaleOf = new Array<number>(p).fill(0);
  const most = problem.maxIterations ?? 2000;
  for (let iteration = 1; iteration <= most; iteration++) {
    const jacobian = problem.jacobian?.(parameters) ?? differences(problem, parameters);
    for (let j = 0; j < p; j++) {
      const norm = Math.sqrt(jacobian.reduce((sum, row, i) => sum + (row[j]! / sigmas[i]!) ** 2, 0));
      scaleOf[j] = Math.max(scaleOf[j]!, norm, 1e-300);
    }
    const next = dampedStep(problem, parameters, residuals, jacobian, scaleOf, lambda, cost);
    if (next === null) return finished(problem, parameters, iteration);
    const moved = next.parameters.every(
      (v, j) => Math.abs(v - parameters[j]!) <= 1e-12 * (Math.abs(v) + 1e-30),
    );
    const gained = cost - next.cost;
    [parameters, residuals, cost, lambda] = [next.parameters, next.residuals, next.cost, next.lambda];
    if (moved || gained <= 1e-15 * cost) return finished(problem, parameters, iteration);
  }
  return { outcome: 'not-converged', reason: `no minimum within ${most} steps` };
}

interface Step {
  readonly parameters: number[];
  readonly residuals: Float64Array;
  readonly cost: number;
  readonly lambda: number;
}

/** The first step, with growing damping, that does not raise the cost; null where none does. */
function dampedStep(
  problem: NonlinearProblem,
  parameters: readonly number[],
  residuals: Float64Array,
  jacobian: readonly (readonly number[])[],
  scales: readonly number[],
  lambda: number,
  cost: number,
): Step | null {
  const p = parameters.length;
  for (let damping = lambda; damping < 1e20; damping *= 4) {
    const extra = scales.map((s, j) =>
      Array.from({ length: p }, (_, k) => (k === j ? Math.sqrt(damping) * s : 0)),
    );
    const design = [...jacobian, ...extra];
    const target = [...residuals, ...new Array<number>(p).fill(0)];
    const weights = [...Array.from(problem.sigmas), ...new Array<number>(p).fill(1)];
    const solution = fitLinearWeighted(design, target, weights);
    if (solution.outcome !== 'converged') continue;
    const candidate = parameters.map((v, j) => v + solution.values[j]!);
    const after = residualsAt(problem, candidate);
    const reached = costOf(after, problem.sigmas);
    if (reached <= cost)
      return {
        parameters: candidate,
        residuals: after,
        cost: reached,
        lambda: Math.max(damping / 10, 1e-15),
      };
  }
  return null;
}

function residualsAt(problem: NonlinearProblem, parameters: readonly number[]): Float64Array {
  const predicted = problem.predict(parameters);
  return Float64Array.from(predicted, (v, i) => problem.observed[i]! - v);
}

function costOf(residuals: Float64Array, sigmas: ArrayLike<number>): number {
  return residuals.reduce((sum, r, i) => sum + (r / sigmas[i]!) ** 2, 0);
}

/** Fourth-order central differences. */
function differences(problem: NonlinearProblem, parameters: readonly number[]): number[][] {
  const rows = Array.from({ length: problem.observed.length }, () =>
    new Array<number>(parameters.length).fill(0),
  );
  parameters.forEach((value, j) => {
    const h = 1e-3 * Math.max(Math.abs(value), 1e-8);
    const at = (d: number): ArrayLike<number> =>
      problem.predict(parameters.map((v, k) => (k === j ? v + d : v)));
    const [a, b, c, d] = [at(-2 * h), at(-h), at(h), at(2 * h)];
    rows.forEach((row, i) => (row[j] = (a[i]! - 8 * b[i]! + 8 * c[i]! - d[i]!) / (12 * h)));
  });
  return rows;
}

function finished(problem: NonlinearProblem, parameters: readonly number[], iterations: number): FitOutcome {
  const jacobian = problem.jacobian?.(parameters) ?? differences(problem, parameters);
  const residuals = residualsAt(problem, parameters);
  if (!jacobian.flat().every(Number.isFinite))
    return { outcome: 'not-converged', reason: 'the model is not finite near the minimum' };
  // The linear fit of the residuals at the minimum has the covariance of the parameters and values near 0.
  const linear = fitLinearWeighted(jacobian, residuals, problem.sigmas, { scale: problem.scale ?? 'input' });
  if (linear.outcome !== 'converged') return linear;
  return {
    ...linear,
    values: Float64Array.from(parameters),
    residuals,
    chiSquared: costOf(residuals, problem.sigmas),
    iterations,
  };
}
