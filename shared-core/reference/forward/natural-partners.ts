import {
  bandConstantsFrom,
  isotopologuesOf,
  lineWavenumberPerCm,
  naturalAbundance,
  publishedConstants,
} from '../../molecule/index.ts';
import type { BandConstants } from '../../molecule/types.ts';
import type { PreparedSpectrum } from '../../spectrum/types.ts';
import type { ForwardBand } from './types.ts';

/** A partner whose strongest line stays below this share of the noise cannot pull the lines of the others. */
const leastOfNoise = 0.3;
/** A partner as common as this is found, or merged: that is for the assignment to say. */
const mostShare = 0.05;

/**
 * Rarer isotopologues of the gases asked for that nobody has found, as followers with their natural share: 13C16O under the lines of
 * 12C16O lies below the noise line by line and still pulls B by as much as its uncertainty.
 *
 * @returns bands to put behind those given; empty where none can matter.
 */
export function naturalPartners(prepared: PreparedSpectrum, bands: readonly ForwardBand[]): ForwardBand[] {
  const noise = Float64Array.from(prepared.noise).sort()[prepared.noise.length >> 1]!;
  return bands.flatMap((leader, index) => {
    const abundance = naturalAbundance(leader.isotopologue);
    if (leader.follows !== undefined || abundance < 0.5) return [];
    const published = publishedConstants(leader.isotopologue.name);
    if (published === null) return [];
    const upper = Number(leader.band.split('-')[0]);
    const own = bandConstantsFrom(published, upper);
    return isotopologuesOf(leader.isotopologue.gas).flatMap((partner): ForwardBand[] => {
      const ratio = naturalAbundance(partner) / abundance;
      const known = bands.some((b) => b.band === leader.band && b.isotopologue.name === partner.name);
      const publishedPartner = publishedConstants(partner.name);
      if (known || publishedPartner === null || !(ratio > 0) || ratio > mostShare) return [];
      if (Math.LN10 * ratio * Math.max(...leader.peakAbsorbance) < leastOfNoise * noise) return [];
      const constants = carried(leader.constants, own, bandConstantsFrom(publishedPartner, upper));
      const shown = leader.ms.filter((m) => isCovered(prepared, lineWavenumberPerCm(constants, m)));
      if (shown.length === 0) return [];
      return [
        {
          isotopologue: partner,
          band: leader.band,
          constants,
          ms: shown,
          distortion: leader.distortion,
          follows: { leader: index, strengthRatio: ratio },
          peakAbsorbance: shown.map((m) => ratio * leader.peakAbsorbance[leader.ms.indexOf(m)]!),
        },
      ];
    });
  });
}

function isCovered(prepared: PreparedSpectrum, wavenumberPerCm: number): boolean {
  const x = prepared.wavenumberPerCm;
  return wavenumberPerCm > x[0]! && wavenumberPerCm < x[x.length - 1]!;
}

/** The leader's constants carried over by the ratio of the published ones: a scale error of the axis goes along. */
function carried(leader: BandConstants, published: BandConstants, partner: BandConstants): BandConstants {
  const by = (key: keyof BandConstants): number =>
    published[key] === 0 ? leader[key] : (leader[key] * partner[key]) / published[key];
  return {
    bandOriginPerCm: by('bandOriginPerCm'),
    rotationalConstantLowerPerCm: by('rotationalConstantLowerPerCm'),
    rotationalConstantUpperPerCm: by('rotationalConstantUpperPerCm'),
    centrifugalConstantLowerPerCm: by('centrifugalConstantLowerPerCm'),
    centrifugalConstantUpperPerCm: by('centrifugalConstantUpperPerCm'),
    sexticConstantLowerPerCm: by('sexticConstantLowerPerCm'),
    sexticConstantUpperPerCm: by('sexticConstantUpperPerCm'),
  };
}
