import type { ParameterMap } from './columns.ts';
import type { FineGrid } from './grid.ts';
import type { Layout } from './layout.ts';
import type { RegionData } from './region-data.ts';
import type { Limits, RegionState } from './region-state.ts';
import type { ForwardBand } from './types.ts';

/** Knowledge about some parameters that is not in the points: penalty yᵀWy, y the distance from what is expected. */
export interface Prior {
  /** Parameters concerned. */
  readonly at: readonly number[];
  /** W, square, row-major. */
  readonly weight: Float64Array;
  readonly distance: (state: RegionState) => readonly number[];
}

/** Everything that the fit of one region stands on. */
export interface RegionProblem {
  readonly bands: readonly ForwardBand[];
  readonly layout: Layout;
  readonly maps: readonly ParameterMap[];
  readonly data: RegionData;
  readonly knots: Float64Array;
  readonly grid: FineGrid;
  readonly limits: Limits;
  readonly start: RegionState;
  readonly priors: readonly Prior[];
}
