import { fitLinearWeighted } from '../fitting/fit-linear-weighted.ts';
import type { ConvergedFit, FitOutcome } from '../fitting/types.ts';
import type { BandConstants } from '../molecule/types.ts';

/** One line of a band as the fit sees it. */
export interface BandLine {
  /** J + 1 for R, −J for P. */
  readonly m: number;
  readonly wavenumberPerCm: number;
  readonly uncertaintyPerCm: number;
}

export interface BandFitOptions {
  /** 'tied': D_n = D_0 (one constant); 'free': both; 'fixed': both held at `centrifugal`. Default 'free'. */
  readonly distortion?: 'tied' | 'free' | 'fixed';
  /** Held D_0, D_n for 'fixed', cm-1. */
  readonly centrifugal?: readonly [number, number];
  /** Held H_0, H_n, cm-1; default 0. */
  readonly sextic?: readonly [number, number];
  readonly scale?: 'input' | 'residuals' | 'larger';
}

export type BandFitOutcome =
  | {
      readonly outcome: 'converged';
      readonly constants: BandConstants;
      /** 5 × 5 over ν̃0, B_0, B_n, D_0, D_n, row-major, cm-2; rows of held constants are 0. */
      readonly covariance: Float64Array;
      readonly residualsPerCm: Float64Array;
      readonly fit: ConvergedFit;
    }
  | Exclude<FitOutcome, ConvergedFit>;

const powers = (j: number): [number, number, number] => {
  const x = j * (j + 1);
  return [x, x * x, x * x * x];
};

/**
 * Constants of one band from its lines, an exact weighted linear solution of
 * ν̃(m) = ν̃0 + F_n(J′) − F_0(J), F_v(J) = B_v J(J+1) − D_v [J(J+1)]² + H_v [J(J+1)]³.
 *
 * @param lines m (not 0), wavenumbers and 1σ uncertainties, cm-1.
 * @returns constants with covariance, or why there is none. @throws RangeError where an m is 0.
 */
export function fitBand(lines: readonly BandLine[], options: BandFitOptions = {}): BandFitOutcome {
  const distortion = options.distortion ?? 'free';
  const [h0, hn] = options.sextic ?? [0, 0];
  const [d0, dn] = distortion === 'fixed' ? (options.centrifugal ?? [0, 0]) : [0, 0];
  const design: number[][] = [];
  const observed: number[] = [];
  for (const { m, wavenumberPerCm } of lines) {
    if (m === 0 || !Number.isInteger(m))
      throw new RangeError(`m: expected a whole number other than 0, got ${m}`);
    const [lo, up] = m > 0 ? [powers(m - 1), powers(m)] : [powers(-m), powers(-m - 1)];
    const row = [1, -lo[0], up[0]];
    if (distortion === 'free') row.push(lo[1], -up[1]);
    if (distortion === 'tied') row.push(lo[1] - up[1]);
    design.push(row);
    observed.push(wavenumberPerCm - hn * up[2] + h0 * lo[2] + dn * up[1] - d0 * lo[1]);
  }
  const fit = fitLinearWeighted(
    design,
    observed,
    lines.map((l) => l.uncertaintyPerCm),
    { scale: options.scale ?? 'input' },
  );
  if (fit.outcome !== 'converged') return fit;
  const v = fit.values;
  const [fitD0, fitDn] =
    distortion === 'free' ? [v[3]!, v[4]!] : distortion === 'tied' ? [v[3]!, v[3]!] : [d0, dn];
  return {
    outcome: 'converged',
    constants: {
      bandOriginPerCm: v[0]!,
      rotationalConstantLowerPerCm: v[1]!,
      rotationalConstantUpperPerCm: v[2]!,
      centrifugalConstantLowerPerCm: fitD0,
      centrifugalConstantUpperPerCm: fitDn,
      sexticConstantLowerPerCm: h0,
      sexticConstantUpperPerCm: hn,
    },
    covariance: spread(fit.covariance, v.length, distortion),
    residualsPerCm: fit.residuals,
    fit,
  };
}

/** Covariance of the fitted constants laid out over all five. */
function spread(covariance: Float64Array, p: number, distortion: 'tied' | 'free' | 'fixed'): Float64Array {
  const at =
    distortion === 'tied' ? [0, 1, 2, 3, 3] : distortion === 'free' ? [0, 1, 2, 3, 4] : [0, 1, 2, -1, -1];
  const full = new Float64Array(25);
  for (let i = 0; i < 5; i++) {
    for (let j = 0; j < 5; j++) {
      if (at[i]! >= 0 && at[j]! >= 0) full[i * 5 + j] = covariance[at[i]! * p + at[j]!]!;
    }
  }
  return full;
}
