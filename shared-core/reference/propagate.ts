/**
 * A function of fitted parameters with its standard uncertainty, by linear propagation of their covariance.
 *
 * u² = gᵀ C g with g the gradient at the fitted values, taken by central differences over one standard deviation of each
 * parameter (exact for linear and quadratic functions).
 *
 * @param parameters n fitted values, any units.
 * @param covariance n × n, row-major, in the products of those units.
 * @param f the derived quantity as a function of the n values.
 * @returns value and standard uncertainty; the uncertainty is null where the covariance holds no finite number.
 * @throws RangeError where the covariance is not n × n.
 */
export function propagate(
  parameters: readonly number[],
  covariance: ArrayLike<number>,
  f: (values: readonly number[]) => number,
): { value: number; uncertainty: number | null } {
  const n = parameters.length;
  if (covariance.length !== n * n) {
    throw new RangeError(
      `covariance: expected ${n * n} elements for ${n} parameters, got ${covariance.length}`,
    );
  }
  const gradient = parameters.map((p, i) => {
    const sigma = Math.sqrt(Math.max(covariance[i * n + i]!, 0));
    const h = sigma > 0 ? sigma : Math.max(Math.abs(p), 1) * 1e-6;
    const shifted = (d: number): number => f(parameters.map((q, j) => (j === i ? q + d : q)));
    return (shifted(h) - shifted(-h)) / (2 * h);
  });
  let variance = 0;
  for (let i = 0; i < n; i++) {
    for (let j = 0; j < n; j++) variance += gradient[i]! * covariance[i * n + j]! * gradient[j]!;
  }
  const uncertainty = Math.sqrt(Math.max(variance, 0));
  return { value: f(parameters), uncertainty: Number.isFinite(uncertainty) ? uncertainty : null };
}
