import type { AbscissaKind } from './types.ts';

/** What a label says about the ordinate; 'percent-absorption' and the rest of the second line cannot be used. */
export type OrdinateLabel =
  | 'absorbance'
  | 'transmittance'
  | 'percent-transmittance'
  | 'percent-absorption'
  | 'reflectance'
  | 'single-beam'
  | 'interferogram'
  | 'raman'
  | 'emission'
  | 'arbitrary'
  | null;

/** Trade words in English, German, French and Spanish (common practice). */
const abscissaWords: readonly (readonly [AbscissaKind, RegExp])[] = [
  ['wavenumber-per-cm', /cm\s*\^?\s*[-−⁻]\s*\(?[1¹]|1\s*\/\s*cm|wave\s*-?numb|wavenumber|wellenzahl|nombres? d.onde|n[uú]mero de onda|kayser|reciprocal cent/i],
  ['wavelength-nm', /\bnm\b|nano-?met/i],
  ['wavelength-um', /[µμ]m\b|\bum\b|micro-?met|\bmicrons?\b|wave\s*-?length|wellenl[aä]e?nge|longueur d.onde|longitud de onda/i],
]; // prettier-ignore

export function abscissaOf(label: string): AbscissaKind | null {
  return abscissaWords.find(([, words]) => words.test(label))?.[0] ?? null;
}

/** Whether a wavelength label gives no unit, so that the size of the values has to tell µm from nm. */
export function lacksWavelengthUnit(label: string): boolean {
  return !/[µμ]m\b|\bum\b|micro-?met|\bmicrons?\b|\bnm\b|nano-?met/i.test(label);
}

const percent = /%|\bpercent|per cent|prozent|pour ?cent|por ?ciento|\bpct\b/i;

/** What the words of a label say about the ordinate, null where they say nothing. */
export function ordinateOf(label: string): OrdinateLabel {
  const text = label.trim();
  if (/interferogram|interf[eé]rogramm/i.test(text)) return 'interferogram';
  if (/single\s*-?\s*beam|einkanal|einzelkanal|mono-?canal|haz simple|\bbackground\b|hintergrund|volt|\bcounts?\b|\benergy\b/i.test(text)) return 'single-beam'; // prettier-ignore
  if (/absorptan|absorptionsgrad/i.test(text)) return 'percent-absorption';
  if (/log(?:10)?\s*\(?\s*(?:1|I0|I_0)\s*\/\s*(?:T|I)\b|-\s*log(?:10)?\s*\(?\s*T\b/i.test(text))
    return 'absorbance';
  if (/reflect|reflex|kubelka|1\s*\/\s*R\b|\bATR\b/i.test(text)) return 'reflectance';
  if (/raman/i.test(text)) return 'raman';
  if (/emission|emissiv|radian/i.test(text)) return 'emission';
  if (/trans?mi[st]|transmit|durchl(?:ä|ae)ss|durchlässig|trasmi/i.test(text)) {
    return percent.test(text) ? 'percent-transmittance' : 'transmittance';
  }
  if (/^\W*%\s*T\b|\bT\s*[[(/]?\s*%|\bpct_?T\b/i.test(text)) return 'percent-transmittance';
  if (/absorb[aei]|absorptio|absorci|extin[ck]|optical density|\babs\b\.?|\bO\.?D\.?\b/i.test(text)) {
    return percent.test(text) ? 'percent-absorption' : 'absorbance';
  }
  if (/^\W*%\s*A\b/i.test(text)) return 'percent-absorption';
  if (/^\W*A\W*$/.test(text) || /^A\s*[[(/]/.test(text)) return 'absorbance';
  if (/^\W*T\W*$/.test(text) || /^T\s*[[(/]/.test(text)) return 'transmittance';
  if (/arbitrary|arb\.|intensit|\ba\.\s?u\./i.test(text)) return 'arbitrary';
  return null;
}
