import { relativeLineStrength } from '../../molecule/index.ts';
import type { Prior, RegionProblem } from './region-problem.ts';
import { isMerged } from './layout.ts';
import type { RegionState } from './region-state.ts';

/** Spread of ln(strength) about the law of line strengths (temperature, what the law leaves out). */
const strengthLawSigma = 0.08;
const roomTemperatureK = 296;

const single = (at: number, of: (s: RegionState) => number, value: number, sigma: number): Prior => ({
  at: [at],
  weight: Float64Array.of(1 / sigma ** 2),
  distance: (s) => [of(s) - value],
});

/** Weak knowledge about instruments and gases, so that what the data leave open stays sensible. */
export function makePriors(problem: Omit<RegionProblem, 'priors'>): Prior[] {
  const at = problem.maps.length - problem.layout.knots - 4;
  const { start, layout } = problem;
  const firstStrength = layout.constants.length + layout.freeLines.length;
  const strengths = layout.ownStrengths.map((i, k) =>
    single(firstStrength + k, (s) => Math.log(s.strengths[i]!), Math.log(start.strengths[i]!), 2.5),
  );
  return [
    ...strengths,
    ...strengthLaws(problem, firstStrength),
    single(at, (s) => Math.log(s.lorentzHalfWidthPerCm), Math.log(start.lorentzHalfWidthPerCm), 1.2),
    single(at + 1, (s) => Math.log(s.pathDifferenceCm), Math.log(start.pathDifferenceCm), 0.5),
    single(at + 2, (s) => s.q1, 0.3, 0.3),
    single(at + 3, (s) => s.q2, 0, 0.05),
  ];
}

/**
 * Where partners have merged, the depth of a line tells only its equivalent width: whether partners are thin (ratio of nature) or
 * black (its square root) moves the doublet's centre. The curve of growth over J tells it, if strengths follow
 * |m| exp(−hcF_0(J)/kT) ν̃ (1 + hm) with a free scale and a free h.
 */
function strengthLaws(problem: Omit<RegionProblem, 'priors'>, firstStrength: number): Prior[] {
  const { bands, layout, start } = problem;
  return bands.flatMap((_, bandIndex): Prior[] => {
    const merged = bands.some((b) => b.follows?.leader === bandIndex && isMerged(b));
    if (!merged) return [];
    const own = layout.ownStrengths.flatMap((i, k) =>
      layout.lines[i]!.bandIndex === bandIndex && !layout.lines[i]!.free ? [{ i, k }] : [],
    );
    if (own.length < 4) return [];
    const law = own.map(({ i }) =>
      Math.log(relativeLineStrength(start.constants[bandIndex]!, layout.lines[i]!.m, roomTemperatureK)),
    );
    const weight = residualProjector(own.map(({ i }) => layout.lines[i]!.m)).map(
      (v) => v / strengthLawSigma ** 2,
    );
    return [
      {
        at: own.map(({ k }) => firstStrength + k),
        weight,
        distance: (s) => own.map(({ i }, j) => Math.log(s.strengths[i]!) - law[j]!),
      },
    ];
  });
}

/** Projector onto what a constant and a straight line in m leave over. */
function residualProjector(ms: readonly number[]): Float64Array {
  const n = ms.length;
  const mean = ms.reduce((sum, m) => sum + m, 0) / n;
  const spread = ms.reduce((sum, m) => sum + (m - mean) ** 2, 0);
  const projector = new Float64Array(n * n);
  for (let a = 0; a < n; a++) {
    for (let b = 0; b < n; b++) {
      const slope = spread > 0 ? ((ms[a]! - mean) * (ms[b]! - mean)) / spread : 0;
      projector[a * n + b] = (a === b ? 1 : 0) - 1 / n - slope;
    }
  }
  return projector;
}

export function penaltyOf(priors: readonly Prior[], state: RegionState): number {
  return priors.reduce((sum, prior) => {
    const y = prior.distance(state);
    const wy = times(prior.weight, y);
    return sum + y.reduce((inner, v, i) => inner + v * wy[i]!, 0);
  }, 0);
}

/** Adds what is known beforehand to the normal equations. */
export function addPriors(
  priors: readonly Prior[],
  state: RegionState,
  normal: Float64Array,
  gradient: Float64Array,
): void {
  const np = gradient.length;
  for (const prior of priors) {
    const n = prior.at.length;
    const wy = times(prior.weight, prior.distance(state));
    prior.at.forEach((p, a) => {
      gradient[p]! -= wy[a]!;
      prior.at.forEach((q, b) => (normal[p * np + q]! += prior.weight[a * n + b]!));
    });
  }
}

/** uᵀΛv over all priors, for rows u and v over the parameters. */
export function priorProduct(priors: readonly Prior[], u: Float64Array, v: Float64Array): number {
  return priors.reduce((sum, prior) => {
    const wv = times(
      prior.weight,
      prior.at.map((p) => v[p]!),
    );
    return sum + prior.at.reduce((inner, p, a) => inner + u[p]! * wv[a]!, 0);
  }, 0);
}

function times(matrix: Float64Array, vector: readonly number[]): number[] {
  const n = vector.length;
  return vector.map((_, a) => vector.reduce((sum, v, b) => sum + matrix[a * n + b]! * v, 0));
}
