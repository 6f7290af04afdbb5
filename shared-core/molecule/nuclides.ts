import { electronMassU } from './physical-constants.ts';
import type { Nuclide } from './types.ts';

const nuclide = (name: string, element: string, atomicNumber: number, massNumber: number, massU: number, abundance: number): Nuclide => ({
  name, element, atomicNumber, massNumber, massU, abundance,
}); // prettier-ignore

/**
 * Masses: AME2020, Wang et al., Chinese Physics C 45 (2021) 030003; 15N, 17O, 18O, 6Li, 7Li, 23Na, 28Si, 31P, 32S, 34S from memory of
 * the same table. Abundances: IUPAC representative isotopic compositions (2013), from memory. D counts as an element of its own: it is prepared.
 */
const nuclides: readonly Nuclide[] = [
  nuclide('H', 'H', 1, 1, 1.007825031898, 0.99985),
  nuclide('D', 'D', 1, 2, 2.014101777844, 1),
  nuclide('6Li', 'Li', 3, 6, 6.0151228874, 0.0759),
  nuclide('7Li', 'Li', 3, 7, 7.0160034366, 0.9241),
  nuclide('12C', 'C', 6, 12, 12, 0.9893),
  nuclide('13C', 'C', 6, 13, 13.00335483534, 0.0107),
  nuclide('14N', 'N', 7, 14, 14.00307400425, 0.99636),
  nuclide('15N', 'N', 7, 15, 15.0001088983, 0.00364),
  nuclide('16O', 'O', 8, 16, 15.99491461926, 0.99757),
  nuclide('17O', 'O', 8, 17, 16.99913175595, 0.00038),
  nuclide('18O', 'O', 8, 18, 17.99915961214, 0.00205),
  nuclide('19F', 'F', 9, 19, 18.99840316207, 1),
  nuclide('23Na', 'Na', 11, 23, 22.989769282, 1),
  nuclide('28Si', 'Si', 14, 28, 27.97692653442, 0.92223),
  nuclide('31P', 'P', 15, 31, 30.97376199768, 1),
  nuclide('32S', 'S', 16, 32, 31.97207117354, 0.9499),
  nuclide('34S', 'S', 16, 34, 33.967867011, 0.0425),
  nuclide('35Cl', 'Cl', 17, 35, 34.968852694, 0.7576),
  nuclide('37Cl', 'Cl', 17, 37, 36.965902573, 0.2424),
  nuclide('79Br', 'Br', 35, 79, 78.918337574, 0.5069),
  nuclide('81Br', 'Br', 35, 81, 80.916288197, 0.4931),
  nuclide('127I', 'I', 53, 127, 126.904472592, 1),
];

/** Conventional atomic weights, IUPAC 2021 (abridged), from memory; D by its own mass. */
const atomicWeights: Readonly<Record<string, number>> = {
  H: 1.008, Li: 6.94, C: 12.011, N: 14.007, O: 15.999, F: 18.998403, Na: 22.98977, Si: 28.085, P: 30.973762, S: 32.06, Cl: 35.45, Br: 79.904, I: 126.90447,
}; // prettier-ignore

/** The nuclide of that name ("H", "D", "35Cl"), or null where it is not in the table. */
export function nuclideNamed(name: string): Nuclide | null {
  return nuclides.find((n) => n.name === name || `${n.massNumber}${n.element}` === name) ?? null;
}

/** Nuclides of an element symbol, the most abundant first; empty where the element is not in the table. */
export function nuclidesOf(element: string): readonly Nuclide[] {
  return nuclides.filter((n) => n.element === element).sort((a, b) => b.abundance - a.abundance);
}

/** Average atomic weight of the nuclide's element, u (D: its own mass). */
export function averageMassU(nuclide: Nuclide): number {
  return atomicWeights[nuclide.element] ?? nuclide.massU;
}

/** Mass of the bare nucleus: atom less its electrons (binding energy of some 1e-8 u left out), u. */
export function nuclearMassU(nuclide: Nuclide): number {
  return nuclide.massU - nuclide.atomicNumber * electronMassU;
}
