/** A column of the Jacobian that is not zero only from `start` on, for `values.length` points. */
export interface Column {
  readonly start: number;
  readonly values: Float64Array;
}

/** Σ a·b over the points that two columns share. */
export function dot(a: Column, b: Column): number {
  const from = Math.max(a.start, b.start);
  const to = Math.min(a.start + a.values.length, b.start + b.values.length);
  let sum = 0;
  const x = a.values;
  const y = b.values;
  for (let i = from - a.start, j = from - b.start, n = to - from; n > 0; n--, i++, j++) sum += x[i]! * y[j]!;
  return sum;
}

/** a weighted point by point by w (over the whole range), then filtered: Σ_k f_k a_{i−k}; the column grows by the filter's length. */
export function whitened(column: Column, weights: Float64Array, filter: Float64Array): Column {
  const p = filter.length - 1;
  const total = weights.length;
  const n = column.values.length;
  const length = Math.min(n + p, total - column.start);
  const weighted = new Float64Array(n);
  for (let i = 0; i < n; i++) weighted[i] = column.values[i]! * weights[column.start + i]!;
  const values = new Float64Array(length);
  for (let i = 0; i < length; i++) {
    let sum = 0;
    const first = Math.max(0, i - n + 1);
    const last = Math.min(p, i);
    for (let k = first; k <= last; k++) sum += filter[k]! * weighted[i - k]!;
    values[i] = sum;
  }
  return { start: column.start, values };
}

/** Parameter = Σ coefficient × basis column: a sparse column of the map from basis to parameters. */
export interface ParameterMap {
  readonly basis: readonly number[];
  readonly coefficients: readonly number[];
}

/** JᵀJ over the parameters and Jᵀr, through the Gram matrix of the basis columns. */
export function normalEquations(
  columns: readonly Column[],
  residual: Column,
  parameters: readonly ParameterMap[],
): { normal: Float64Array; gradient: Float64Array } {
  const nb = columns.length;
  const np = parameters.length;
  const order = columns.map((_, i) => i).sort((i, j) => columns[i]!.start - columns[j]!.start);
  // G·P first (basis × parameters), then Pᵀ(G·P).
  const gp = new Float64Array(nb * np);
  const byBasis = basisToParameters(nb, parameters);
  const add = (i: number, j: number, value: number): void => {
    for (const [q, coefficient] of byBasis[j]!) gp[i * np + q]! += value * coefficient;
  };
  for (let u = 0; u < nb; u++) {
    const i = order[u]!;
    const end = columns[i]!.start + columns[i]!.values.length;
    for (let v = u; v < nb; v++) {
      const j = order[v]!;
      if (columns[j]!.start >= end) break;
      const value = dot(columns[i]!, columns[j]!);
      add(i, j, value);
      if (i !== j) add(j, i, value);
    }
  }
  const normal = new Float64Array(np * np);
  const gradient = new Float64Array(np);
  const right = columns.map((c) => dot(c, residual));
  parameters.forEach((parameter, a) => {
    parameter.basis.forEach((i, k) => {
      const coefficient = parameter.coefficients[k]!;
      gradient[a]! += coefficient * right[i]!;
      for (let b = 0; b < np; b++) normal[a * np + b]! += coefficient * gp[i * np + b]!;
    });
  });
  return { normal, gradient };
}

function basisToParameters(nb: number, parameters: readonly ParameterMap[]): [number, number][][] {
  const map: [number, number][][] = Array.from({ length: nb }, () => []);
  parameters.forEach((parameter, q) =>
    parameter.basis.forEach((i, k) => map[i]!.push([q, parameter.coefficients[k]!])),
  );
  return map;
}
