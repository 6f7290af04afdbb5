import type { AssignedBand, AssignedLine } from '../assignment/types.ts';
import {
  lineWavenumberPerCm,
  naturalAbundance,
  publishedConstants,
  relativeLineStrength,
  sexticConstantPerCm,
} from '../molecule/index.ts';
import type { BandConstants } from '../molecule/types.ts';
import type { PreparedSpectrum } from '../spectrum/types.ts';
import type { DistortionModel, ForwardBand } from './forward/types.ts';

/** Lines below this share of the noise cannot be told from it; they stay out of the model. */
const leastSignalToNoise = 1;
const roomTemperatureK = 296;

/**
 * Bands of one region for the model of the spectrum: every m between and just beyond the assigned ones whose line should stand above
 * the noise, with starting strengths from the assigned lines and the strength law.
 *
 * H of both states is held by H ≈ (2D/3ωe²)(12B² − αeωe) where ωe is published, else 0.
 *
 * @param bands assigned bands that overlap, leaders before their merged partners. @param lines corrected lines of all bands.
 */
export function forwardBands(
  prepared: PreparedSpectrum,
  bands: readonly AssignedBand[],
  lines: readonly AssignedLine[],
): ForwardBand[] {
  const kept = bands.filter((b) => b.merged || linesOf(b, lines).length >= 4);
  return kept.map((band) => {
    const constants = withSextic(band);
    const leader = band.merged
      ? kept.findIndex(
          (b) => !b.merged && b.band === band.band && b.isotopologue.gas === band.isotopologue.gas,
        )
      : -1;
    const source = leader >= 0 ? kept[leader]! : band;
    const own = linesOf(source, lines);
    const amount = amountOf(source, own);
    const ratio =
      leader >= 0 ? naturalAbundance(band.isotopologue) / naturalAbundance(source.isotopologue) : 1;
    const ms = modelledMs(prepared, source, constants, own, amount);
    const out = new Set(own.filter((l) => !l.used).map((l) => l.m));
    return {
      isotopologue: band.isotopologue,
      band: band.band,
      constants,
      ms,
      distortion: distortionModel(own),
      freeMs: ms.filter((m) => out.has(m)),
      ...(leader >= 0 ? { follows: { leader, strengthRatio: ratio } } : {}),
      peakAbsorbance: ms.map((m) => {
        const line = own.find((l) => l.m === m);
        const expected = amount * relativeLineStrength(constants, m, roomTemperatureK);
        return ratio * (line === undefined ? expected : Math.max(line.peakAbsorbance, 1e-5));
      }),
    };
  });
}

const linesOf = (band: AssignedBand, lines: readonly AssignedLine[]): AssignedLine[] =>
  lines.filter((l) => l.isotopologue === band.isotopologue.name && l.band === band.band);

/** Peak absorbance per unit of relative strength: the median over unsaturated lines. */
function amountOf(band: AssignedBand, own: readonly AssignedLine[]): number {
  const usable = own.filter((l) => !l.saturated);
  const ratios = (usable.length >= 3 ? usable : own)
    .map((l) => l.peakAbsorbance / relativeLineStrength(band.constants, l.m, roomTemperatureK))
    .sort((a, b) => a - b);
  return ratios[ratios.length >> 1] ?? 0;
}

/** All m from the first to the last assigned one and up to three beyond, where the line should show and the file has points. */
function modelledMs(
  prepared: PreparedSpectrum,
  band: AssignedBand,
  constants: BandConstants,
  own: readonly AssignedLine[],
  amount: number,
): number[] {
  const x = prepared.wavenumberPerCm;
  const width = prepared.resolutionPerCm ?? 4 * prepared.stepPerCm;
  const ms = own.map((l) => l.m);
  const [low, high] = [Math.min(...ms) - 3, Math.max(...ms) + 3];
  const result: number[] = [];
  for (let m = low; m <= high; m++) {
    if (m === 0) continue;
    const position = lineWavenumberPerCm(constants, m);
    if (position < x[0]! + width || position > x[x.length - 1]! - width) continue;
    const depth = Math.LN10 * amount * relativeLineStrength(band.constants, m, roomTemperatureK);
    if (ms.includes(m) || depth > leastSignalToNoise * noiseNear(prepared, position)) result.push(m);
  }
  return result;
}

function noiseNear(prepared: PreparedSpectrum, wavenumberPerCm: number): number {
  const x = prepared.wavenumberPerCm;
  let low = 0;
  let high = x.length - 1;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (x[middle]! < wavenumberPerCm) low = middle + 1;
    else high = middle;
  }
  return prepared.noise[low]!;
}

/** Both D are free where lines go far enough on both sides to tell them apart, one where they go less far, none where they do not. */
function distortionModel(own: readonly AssignedLine[]): DistortionModel {
  const used = own.filter((l) => l.used);
  const p = Math.max(0, ...used.map((l) => -l.m));
  const r = Math.max(0, ...used.map((l) => l.m));
  if (Math.min(p, r) >= 6 && used.length >= 11) return 'free';
  return used.length >= 8 && Math.max(p, r) >= 5 ? 'tied' : 'held';
}

function withSextic(band: AssignedBand): BandConstants {
  const published = publishedConstants(band.isotopologue.name);
  const c = band.constants;
  if (published === null) return c;
  const alpha = c.rotationalConstantLowerPerCm - c.rotationalConstantUpperPerCm;
  const d = (c.centrifugalConstantLowerPerCm + c.centrifugalConstantUpperPerCm) / 2;
  const h = sexticConstantPerCm(
    d,
    c.rotationalConstantLowerPerCm + alpha / 2,
    published.alphaEPerCm,
    published.omegaEPerCm,
  );
  return { ...c, sexticConstantLowerPerCm: h, sexticConstantUpperPerCm: h };
}
