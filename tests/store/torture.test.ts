import { expect, it } from 'vitest';
import { torture } from './torture-rounds.ts';

// A short seeded form; `npm run torture` does two hundred.
it('a store survives being killed at random moments with everything that was acknowledged', async () => {
  const counts = await torture(5, 20_261);
  expect(counts.faults).toEqual([]);
  expect(counts.kills).toBe(5);
  expect(counts.acknowledged).toBeGreaterThan(5);
}, 240_000);
