import { describe, expect, it } from 'vitest';
import { columnExtremes, extremesInView, firstIndexFrom } from '../../renderer/charts/column-extremes.ts';
import type { DrawnPoint } from '../../renderer/charts/column-extremes.ts';

function ramp(n: number, make: (i: number) => number): { x: Float64Array; y: Float64Array } {
  return {
    x: Float64Array.from({ length: n }, (_, i) => 2000 + i * 0.1),
    y: Float64Array.from({ length: n }, (_, i) => make(i)),
  };
}

describe('columnExtremes', () => {
  it('keeps the exact height and place of every peak that is one point wide', () => {
    const { x, y } = ramp(40_000, (i) => (i % 1777 === 5 ? 1 + i / 1e5 : 0.001 * Math.sin(i)));
    const drawn: DrawnPoint[] = [];
    columnExtremes(x, y, { from: x[0]!, to: x.at(-1)! }, 900, drawn);
    expect(drawn.length).toBeLessThanOrEqual(2 * 901);
    const peaks = drawn.filter((point) => point.y > 0.5);
    const expected = [...y.keys()].filter((i) => y[i]! > 0.5).map((i) => ({ x: x[i]!, y: y[i]! }));
    expect(peaks).toEqual(expected);
  });

  it('draws ascending x only and every point where few lie in view', () => {
    const { x, y } = ramp(5_000, (i) => Math.cos(i / 3));
    const drawn: DrawnPoint[] = [];
    columnExtremes(x, y, { from: 2100, to: 2110 }, 900, drawn);
    expect(drawn.map((point) => point.x)).toEqual([
      ...x.subarray(firstIndexFrom(x, 2100) - 1, firstIndexFrom(x, 2110) + 1),
    ]);
    columnExtremes(x, y, { from: 2000, to: 2499 }, 300, drawn);
    expect(drawn.every((point, i) => i === 0 || point.x > drawn[i - 1]!.x)).toBe(true);
  });

  it('reuses the points of the last frame', () => {
    const { x, y } = ramp(1_000, (i) => i);
    const drawn: DrawnPoint[] = [];
    columnExtremes(x, y, { from: 2000, to: 2099 }, 50, drawn);
    const first = drawn[0];
    columnExtremes(x, y, { from: 2010, to: 2050 }, 50, drawn);
    expect(drawn[0]).toBe(first);
  });

  it('finds the extremes of a view and nothing where no point lies', () => {
    const { x, y } = ramp(100, (i) => (i === 50 ? 9 : i === 20 ? -4 : 0));
    expect(extremesInView(x, y, 2004, 2006)).toEqual([0, 9]);
    expect(extremesInView(x, y, 2001, 2006)).toEqual([-4, 9]);
    expect(extremesInView(new Float64Array(0), new Float64Array(0), 0, 1)).toBeNull();
  });
});
