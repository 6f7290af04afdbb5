import { averageMassU, nuclearMassU, nuclideNamed, nuclidesOf } from './nuclides.ts';
import type { Isotopologue, Nuclide } from './types.ts';

/**
 * The diatomic of that name: "H35Cl", "D37Cl", "12C16O", "H79Br", "H19F"; an atom without a mass number is taken as its most
 * abundant nuclide ("HF", "HCl").
 *
 * @returns null where the name is not two atoms of the table.
 */
export function isotopologue(name: string): Isotopologue | null {
  const match = /^(\d*)([A-Z][a-z]?)(\d*)([A-Z][a-z]?)$/.exec(name.trim());
  if (match === null) return null;
  const first = atom(match[1]!, match[2]!);
  const second = atom(match[3]!, match[4]!);
  return first === null || second === null ? null : diatomic(first, second);
}

/** A diatomic made of two nuclides; the name carries mass numbers where the atom is not H or D. */
export function diatomic(first: Nuclide, second: Nuclide): Isotopologue {
  return {
    name: `${first.name}${second.name}`,
    gas: `${first.element}${second.element}`,
    nuclides: [first, second],
    reducedMassU: (first.massU * second.massU) / (first.massU + second.massU),
  };
}

/** Isotopologues of a gas ("HCl", "CO"), the most abundant first; those below one in ten thousand are left out. */
export function isotopologuesOf(gas: string): readonly Isotopologue[] {
  const parent = isotopologue(gas);
  if (parent === null) return [];
  const [a, b] = parent.nuclides;
  return nuclidesOf(a.element)
    .flatMap((x) => nuclidesOf(b.element).map((y) => diatomic(x, y)))
    .filter((i) => naturalAbundance(i) > 1e-4)
    .sort((x, y) => naturalAbundance(y) - naturalAbundance(x));
}

/** Product of the natural abundances of the two nuclides (D counts as 1). */
export function naturalAbundance(isotopologue: Isotopologue): number {
  return isotopologue.nuclides[0].abundance * isotopologue.nuclides[1].abundance;
}

/** Reduced mass μ = m₁m₂/(m₁ + m₂) with isotopic (atomic), average or nuclear masses, u. */
export function reducedMassU(isotopologue: Isotopologue, masses: 'isotopic' | 'average' | 'nuclear'): number {
  const mass =
    masses === 'average' ? averageMassU : masses === 'nuclear' ? nuclearMassU : (n: Nuclide) => n.massU;
  const [a, b] = isotopologue.nuclides.map(mass) as [number, number];
  return (a * b) / (a + b);
}

function atom(massNumber: string, symbol: string): Nuclide | null {
  if (massNumber !== '') return nuclideNamed(massNumber + symbol);
  return nuclidesOf(symbol)[0] ?? null;
}
