import type { Reliability } from './types.ts';
import type { Reason } from '../units/types.ts';

/** A reason that speaks against a reference, and how far it takes it down. */
export interface Doubt extends Reason {
  readonly takesDownTo: 'check' | 'none';
}

/** Reliability that a list of doubts leaves: *none* beats *check* beats *sound*. */
export function reliabilityAfter(doubts: readonly Doubt[]): Reliability {
  if (doubts.some((d) => d.takesDownTo === 'none')) return 'none';
  return doubts.length > 0 ? 'check' : 'sound';
}

/** The doubts as reasons for people, gravest first, without repeats. */
export function reasonsOf(doubts: readonly Doubt[]): Reason[] {
  const ordered = [...doubts].sort(
    (a, b) => Number(b.takesDownTo === 'none') - Number(a.takesDownTo === 'none'),
  );
  const seen = new Set<string>();
  return ordered.flatMap(({ code, text }) => {
    if (seen.has(code + text)) return [];
    seen.add(code + text);
    return [{ code, text }];
  });
}
