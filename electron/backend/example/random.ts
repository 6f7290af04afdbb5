/** A small seeded generator of our own (sfc32 seeded by splitmix32): the same seed gives the same numbers everywhere. */
export interface Random {
  /** Uniform in [0, 1). */
  uniform(): number;
  /** Uniform in [low, high). */
  between(low: number, high: number): number;
  /** Whole number from 0 to count - 1. */
  below(count: number): number;
  /** Normal deviate, mean 0, standard deviation 1. */
  normal(): number;
  /** One of the elements of a list that is not empty. */
  pick<T>(list: readonly T[]): T;
  /** The list in random order. */
  shuffled<T>(list: readonly T[]): T[];
}

function splitmix32(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (state + 0x9e3779b9) >>> 0;
    let mixed = state ^ (state >>> 16);
    mixed = Math.imul(mixed, 0x21f0aaad);
    mixed ^= mixed >>> 15;
    mixed = Math.imul(mixed, 0x735a2d97);
    return (mixed ^ (mixed >>> 15)) >>> 0;
  };
}

/** A generator for `seed`; `stream` gives independent sequences of one seed (constants, noise, ...). */
export function createRandom(seed: number, stream = 0): Random {
  if (!Number.isFinite(seed)) throw new RangeError(`seed must be a finite number, got ${seed}`);
  const mix = splitmix32((Math.imul(seed | 0, 0x85ebca6b) ^ Math.imul(stream + 1, 0xc2b2ae35)) >>> 0);
  let [a, b, c, counter] = [mix(), mix(), mix(), 1];
  const uniform = (): number => {
    const sum = (((a + b) >>> 0) + counter) >>> 0;
    counter = (counter + 1) >>> 0;
    a = b ^ (b >>> 9);
    b = (c + (c << 3)) >>> 0;
    c = ((c << 21) | (c >>> 11)) >>> 0;
    c = (c + sum) >>> 0;
    return sum / 4294967296;
  };
  for (let i = 0; i < 16; i++) uniform();
  let spare: number | null = null;
  const normal = (): number => {
    if (spare !== null) {
      const kept = spare;
      spare = null;
      return kept;
    }
    const radius = Math.sqrt(-2 * Math.log(1 - uniform()));
    const angle = 2 * Math.PI * uniform();
    spare = radius * Math.sin(angle);
    return radius * Math.cos(angle);
  };
  const below = (count: number): number => Math.floor(uniform() * count);
  return {
    uniform,
    normal,
    below,
    between: (low, high) => low + (high - low) * uniform(),
    pick: (list) => {
      if (list.length === 0) throw new RangeError('list must not be empty');
      return list[below(list.length)]!;
    },
    shuffled: (list) => {
      const copy = [...list];
      for (let i = copy.length - 1; i > 0; i--) {
        const j = below(i + 1);
        [copy[i], copy[j]] = [copy[j]!, copy[i]!];
      }
      return copy;
    },
  };
}
