import type { BandScore } from './band-search.ts';
import type { RefinedBand } from './refine-band.ts';
import type { RunnerUp } from './types.ts';

/** Odds below this are told as this: beyond it the model of the odds means nothing. */
const smallestOdds = 1e-30;
const scaleSigmaPpm = 100;

/**
 * The next best reading of the same lines: another candidate that shares them, or the same band with every m moved by −2 … +2
 * (which leaves the residuals as they are, so that only the band origin decides).
 */
export function runnerUpOf(chosen: BandScore, refined: RefinedBand, ranked: readonly BandScore[]): RunnerUp {
  const own = new Set(refined.matches.map((x) => x.line));
  const rivals = ranked
    .filter((s) => s !== chosen && s.matches.filter((x) => own.has(x.line)).length >= 0.3 * s.matches.length)
    .map((s) => ({
      text: `${s.candidate.isotopologue.name} ${s.candidate.upper}-0 with ${s.matches.length} of the lines`,
      odds: Math.exp(Math.min(0, s.logOdds - chosen.logOdds)),
    }));
  const published = chosen.candidate.constants.bandOriginPerCm;
  const { constants } = refined;
  const spacing = constants.rotationalConstantLowerPerCm + constants.rotationalConstantUpperPerCm;
  const ownPpm = 1e6 * (constants.bandOriginPerCm / published - 1);
  // The nearer shift first: of two that are equally impossible it is the one to look at.
  const shifts = [-1, 1, -2, 2].map((s) => {
    const ppm = 1e6 * ((constants.bandOriginPerCm - s * spacing) / published - 1);
    return {
      text: `${chosen.candidate.isotopologue.name} ${chosen.candidate.upper}-0 with every m ${Math.abs(s)} ${s > 0 ? 'higher' : 'lower'}: its origin would stand ${ppm.toFixed(0)} ppm from the published one`,
      odds: Math.exp(Math.max(-200, (ownPpm ** 2 - ppm ** 2) / (2 * scaleSigmaPpm ** 2))),
    };
  });
  const best = [...rivals, ...shifts].sort((a, b) => b.odds - a.odds)[0]!;
  return { text: best.text, odds: Math.max(smallestOdds, best.odds) };
}
