import type { Agreement } from '../../shared-core/marking/types.ts';
import type { Reliability } from '../../shared-core/reference/types.ts';
import { text } from '../text/index.ts';

export type ShapeName =
  'disc' | 'half' | 'diamond' | 'dash' | 'smudge' | 'ring' | 'wedge' | 'struck' | 'hand' | 'carry' | 'spark';
export type Tone = 'good' | 'part' | 'bad' | 'unclear' | 'calm';

/** How a state is shown: never by colour alone, always with a shape and a word. */
export interface StateLook {
  readonly shape: ShapeName;
  readonly tone: Tone;
  readonly word: string;
}

const agreements: Readonly<Record<Agreement, Omit<StateLook, 'word'>>> = {
  within: { shape: 'disc', tone: 'good' },
  'part credit': { shape: 'half', tone: 'part' },
  outside: { shape: 'diamond', tone: 'bad' },
  'not given': { shape: 'dash', tone: 'calm' },
  unreadable: { shape: 'smudge', tone: 'unclear' },
  'no reference': { shape: 'ring', tone: 'calm' },
};

export function agreementLook(agreement: Agreement): StateLook {
  return { ...agreements[agreement], word: text.terms.agreement[agreement] };
}

const reliabilities: Readonly<Record<Reliability, Omit<StateLook, 'word'>>> = {
  sound: { shape: 'disc', tone: 'good' },
  check: { shape: 'wedge', tone: 'part' },
  none: { shape: 'struck', tone: 'bad' },
};

export function reliabilityLook(reliability: Reliability): StateLook {
  return { ...reliabilities[reliability], word: text.terms.reliability[reliability] };
}
