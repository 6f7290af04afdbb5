import type { Field } from './fields.ts';

const digits = Array.from('0123456789');

/** A number that a slip of the pen may have been meant to be. */
export interface MeantNumber {
  readonly code: 'digits-swapped' | 'digit-lost';
  readonly value: number;
  readonly text: string;
  /** How many such numbers there are: the prior is shared among them. */
  readonly among: number;
}

/**
 * Numbers that differ from the written one by one slip of the pen: two neighbouring digits exchanged, one digit lost, doubled or
 * replaced.
 */
export function meantNumbers(field: Field): MeantNumber[] {
  const match = /\d+(?:[.,]\d+)?/.exec(field.submitted.text.replace(/[\s\u2009\u202f]/g, ''));
  if (match === null) return [];
  const written = match[0].replace(',', '.');
  const factor = field.value / Number(written);
  if (!Number.isFinite(factor) || factor === 0) return [];
  const as = (code: MeantNumber['code'], texts: readonly string[]): MeantNumber[] => {
    const different = [...new Set(texts)].filter(
      (t) => t !== written && Number.isFinite(Number(t)) && Number(t) !== 0,
    );
    return different.map((text) => ({ code, text, value: Number(text) * factor, among: different.length }));
  };
  return [
    ...as('digits-swapped', swaps(written)),
    ...as('digit-lost', [...insertions(written), ...deletions(written), ...replacements(written)]),
  ];
}

function digitPlaces(text: string): number[] {
  return Array.from(text).flatMap((c, i) => (c === '.' ? [] : [i]));
}

function swaps(text: string): string[] {
  const places = digitPlaces(text);
  return places.slice(1).map((j, n) => {
    const i = places[n]!;
    const characters = Array.from(text);
    [characters[i], characters[j]] = [characters[j]!, characters[i]!];
    return characters.join('');
  });
}

function insertions(text: string): string[] {
  return Array.from({ length: text.length + 1 }, (_, i) => i).flatMap((i) =>
    digits.map((d) => text.slice(0, i) + d + text.slice(i)),
  );
}

function deletions(text: string): string[] {
  return digitPlaces(text).map((i) => text.slice(0, i) + text.slice(i + 1));
}

function replacements(text: string): string[] {
  return digitPlaces(text).flatMap((i) => digits.map((d) => text.slice(0, i) + d + text.slice(i + 1)));
}
