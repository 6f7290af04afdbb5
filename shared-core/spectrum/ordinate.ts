import type { Reason } from '../units/types.ts';
import { ordinateEvidence, type OrdinateEvidence } from './ordinate-evidence.ts';
import type { OrdinateKind } from './types.ts';
import { ordinateOf, type OrdinateLabel } from './words.ts';

export interface OrdinateDecision {
  readonly kind: OrdinateKind;
  readonly reason: string;
  readonly notes: readonly Reason[];
}

interface Guess {
  readonly kind: OrdinateKind;
  /** What in the data speaks for it, as the end of a sentence. */
  readonly because: string;
}

const names: Record<OrdinateKind, string> = {
  absorbance: 'absorbance',
  transmittance: 'transmittance (0 to 1)',
  'percent-transmittance': 'transmittance in percent',
  unusable: 'nothing usable',
};

function short(value: number): string {
  return String(Number(value.toPrecision(3)));
}

/**
 * A base that swings like the output of a lamp and detector: by more than a factor of three, or by half without
 * coming near full transmittance anywhere (`full`: 1 or 100).
 */
function looksLikeSingleBeam(data: OrdinateEvidence, full: number): boolean {
  const { edgeRatio, edgeHeight } = data;
  if (edgeRatio === null || edgeRatio > 3) return true;
  const reachesFull = edgeHeight > 0.75 * full && edgeHeight < 1.6 * full;
  return !reachesFull && edgeRatio > (full === 1 ? 1.9 : 1.5);
}

function singleBeam(data: OrdinateEvidence): Guess {
  const because = `the base swings up to ${short(data.edgeHeight)} ${data.edgeRatio === null ? 'and down to nothing' : `by a factor of ${short(data.edgeRatio)}`}, as in a single-beam spectrum`;
  return { kind: 'unusable', because };
}

/** A base and lines below it: transmittance, percent, or absorbance turned over. */
function guessOfDips(data: OrdinateEvidence): Guess {
  const base = data.highBase;
  const because = `lines point down from a base near ${short(base)}`;
  if (Math.abs(base) < 0.25 || (base < 0.7 && data.low < -0.15)) return { kind: 'absorbance', because };
  if (base > 0.15 && base < 1.6 && data.least > -0.5) {
    return looksLikeSingleBeam(data, 1) ? singleBeam(data) : { kind: 'transmittance', because };
  }
  if (base > 15 && base < 160 && data.least > -30) {
    return looksLikeSingleBeam(data, 100) ? singleBeam(data) : { kind: 'percent-transmittance', because };
  }
  return { kind: 'unusable', because: `${because}, as in a single-beam spectrum or in arbitrary units` };
}

/** A base and lines above it: absorbance, or an emission-like transmittance. */
function guessOfPeaks(data: OrdinateEvidence): Guess {
  const base = data.lowBase;
  const because = `lines point up from a base near ${short(base)}`;
  if (base > 0.75 && base < 1.25 && data.greatest < 2.2) {
    return { kind: 'transmittance', because: `${because}, as of a warm gas` };
  }
  if (base > -2 && base < 3 && data.high < 10) return { kind: 'absorbance', because };
  if (base > 60 && base < 130 && data.high < 250) {
    return { kind: 'percent-transmittance', because: `${because}, as of a warm gas` };
  }
  return { kind: 'unusable', because: `${because} up to ${short(data.greatest)}, as in arbitrary units` };
}

function guessOfFlat(data: OrdinateEvidence): Guess {
  const because = `the values lie near ${short(data.middle)}`;
  if (data.middle > -1 && data.middle < 0.6) return { kind: 'absorbance', because };
  if (data.middle >= 0.6 && data.middle < 1.6) return { kind: 'transmittance', because };
  if (data.middle > 15 && data.middle < 160) return { kind: 'percent-transmittance', because };
  return { kind: 'unusable', because: `${because}, as in arbitrary units` };
}

function guessOf(data: OrdinateEvidence): Guess {
  if (data.looksLikeInterferogram) {
    return { kind: 'unusable', because: 'a burst swings to both sides, as in an interferogram' };
  }
  if (data.direction === 'down') return guessOfDips(data);
  return data.direction === 'up' ? guessOfPeaks(data) : guessOfFlat(data);
}

/** Whether the values can be what the label says, lines of either direction allowed. */
function canBe(kind: OrdinateKind, data: OrdinateEvidence): boolean {
  if (kind === 'absorbance') {
    const isTransmittanceLike = data.direction === 'down' && data.highBase > 0.7 && data.least > -0.1;
    return data.lowBase > -3 && data.high < 12 && data.highBase < 6 && !isTransmittanceLike;
  }
  const scale = kind === 'transmittance' ? 1 : 100;
  const base = (data.direction === 'up' ? data.lowBase : data.highBase) / scale;
  return base > 0.05 && base < 2 && data.low / scale > -0.3 && (data.direction !== 'up' || base > 0.35);
}

const unusableLabels: Record<Exclude<OrdinateLabel, OrdinateKind | null>, string> = {
  'percent-absorption': 'absorption in percent',
  reflectance: 'a reflectance',
  'single-beam': 'a single-beam spectrum',
  interferogram: 'an interferogram',
  raman: 'a Raman spectrum',
  emission: 'an emission spectrum',
  arbitrary: 'arbitrary units',
};

function isUsable(label: OrdinateLabel): label is Exclude<OrdinateKind, 'unusable'> {
  return label === 'absorbance' || label === 'transmittance' || label === 'percent-transmittance';
}

function contradiction(labelled: string, guess: Guess): OrdinateDecision {
  const taken =
    guess.kind === 'unusable' ? 'so the file cannot be used' : `and were taken as ${names[guess.kind]}`;
  const text = `The file calls its ordinate ${labelled}, but ${guess.because}, ${taken}.`;
  return { kind: guess.kind, reason: text, notes: [{ code: 'ordinate-label-contradicts', text }] };
}

/**
 * Absorbance, transmittance 0-1 or 0-100 %, or unusable, from the label and the numbers together. The label holds where
 * the numbers can be what it says; where they cannot, the numbers decide and a note says so.
 */
export function decideOrdinate(y: Float64Array, labelText: string): OrdinateDecision {
  const label = ordinateOf(labelText);
  const data = ordinateEvidence(y);
  const guess = guessOf(data);
  if (isUsable(label)) {
    if (data.looksLikeInterferogram) return contradiction(names[label], guess);
    if (canBe(label, data)) {
      return { kind: label, reason: `The file calls its ordinate ${names[label]}, and the data allow it: ${guess.because}.`, notes: [] }; // prettier-ignore
    }
    return contradiction(names[label], guess);
  }
  if (label !== null && label !== 'arbitrary') {
    const text = `The file calls its ordinate ${unusableLabels[label]}; only absorbance and transmittance can be used.`;
    return { kind: 'unusable', reason: text, notes: [] };
  }
  const unnamed =
    label === 'arbitrary' ? 'The file gives arbitrary units' : 'The file does not name its ordinate';
  if (guess.kind === 'unusable')
    return { kind: 'unusable', reason: `${unnamed}, and ${guess.because}.`, notes: [] };
  const reason = `${unnamed}; it was taken as ${names[guess.kind]}, because ${guess.because}.`;
  return { kind: guess.kind, reason, notes: [{ code: 'ordinate-unlabelled', text: reason }] };
}
