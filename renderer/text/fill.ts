/** Puts figures and names into a sentence: fill("{n} files", {n: 3}). A place without a value is a mistake and throws. */
export function fill(sentence: string, values: Readonly<Record<string, string | number>>): string {
  return sentence.replace(/\{(\w+)\}/g, (_whole, name: string) => {
    const value = values[name];
    if (value === undefined) throw new RangeError(`fill: no value for "${name}" in "${sentence}"`);
    return String(value);
  });
}

/** Chooses between one and several: plural(1, ['{n} file', '{n} files']). */
export function plural(n: number, forms: readonly [string, string]): string {
  return fill(forms[n === 1 ? 0 : 1], { n });
}

const raised = '\u2070\u00b9\u00b2\u00b3\u2074\u2075\u2076\u2077\u2078\u2079';

/** Isotopologue as the trade writes it: H35Cl → H³⁵Cl, 12C16O → ¹²C¹⁶O. */
export function isotopologueText(name: string): string {
  return name.replace(/\d/g, (digit) => raised[Number(digit)]!);
}
