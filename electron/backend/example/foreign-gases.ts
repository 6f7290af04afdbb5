import { createRandom } from './random.ts';

/** A line of a gas that is not asked for: centre and relative strength (strongest of its gas: 1). */
export interface ForeignLine {
  readonly wavenumberPerCm: number;
  readonly relativeStrength: number;
}

/**
 * Irregular lines that stand for the vapours of an asymmetric top. Places are invented (the same in every spectrum),
 * the ranges are those where the vapour absorbs (common practice).
 */
function irregular(
  ranges: readonly (readonly [number, number, number, number])[],
  seed: number,
): ForeignLine[] {
  const random = createRandom(seed, 7);
  return ranges.flatMap(([from, to, count, strength]) =>
    Array.from({ length: count }, () => ({
      wavenumberPerCm: random.between(from, to),
      relativeStrength: strength * Math.exp(-2.5 * random.uniform()),
    })),
  );
}

/** Water vapour: the bending band, the stretching bands, a few weak lines in the window between. */
const water = irregular(
  [
    [1320, 1550, 60, 0.9],
    [1630, 1980, 80, 1],
    [1980, 2160, 14, 0.05],
    [3540, 3950, 120, 1],
    [2700, 3120, 14, 0.01],
  ],
  20,
);

/** Half-deuterated water, as it comes with DCl made from heavy water. */
const halfHeavyWater = irregular(
  [
    [1330, 1510, 40, 0.8],
    [2600, 2680, 18, 0.7],
    [2690, 2860, 40, 1],
  ],
  21,
);

/** Carbon dioxide, asymmetric stretch: even J only; nu3 = 2349.143, B'' = 0.39022, B' = 0.38714 cm-1 (from memory). */
function carbonDioxideLines(): ForeignLine[] {
  const lines: ForeignLine[] = [];
  for (let j = 0; j <= 60; j += 2) {
    const strength = Math.exp((-1.4388 * 0.39022 * j * (j + 1)) / 296);
    const lower = 0.39022 * j * (j + 1) - 1.33e-7 * (j * (j + 1)) ** 2;
    for (const m of [j + 1, -j]) {
      if (m === 0) continue;
      const upperJ = m > 0 ? j + 1 : j - 1;
      const upper = 0.38714 * upperJ * (upperJ + 1) - 1.33e-7 * (upperJ * (upperJ + 1)) ** 2;
      lines.push({
        wavenumberPerCm: 2349.143 + upper - lower,
        relativeStrength: (Math.abs(m) * strength) / 11.6,
      });
    }
  }
  return lines;
}

/** Absorbance at the centre of the strongest line of each vapour; negative where the background holds more of it. */
export interface ForeignGases {
  readonly water?: number;
  readonly carbonDioxide?: number;
  readonly halfHeavyWater?: number;
}

/** Lines with signed absorbance at their centres. */
export function foreignLines(gases: ForeignGases): readonly { wavenumberPerCm: number; peak: number }[] {
  const scaled = (lines: readonly ForeignLine[], peak: number | undefined) =>
    peak === undefined || peak === 0
      ? []
      : lines.map((line) => ({
          wavenumberPerCm: line.wavenumberPerCm,
          peak: line.relativeStrength * peak,
        }));
  return [
    ...scaled(water, gases.water),
    ...scaled(halfHeavyWater, gases.halfHeavyWater),
    ...(gases.carbonDioxide === undefined ? [] : scaled(carbonDioxideLines(), gases.carbonDioxide)),
  ];
}
