import type { Isotopologue, Nuclide } from '../../molecule/types.ts';
import type { MassKind } from '../types.ts';

/** Standard atomic weights, abridged: IUPAC (CIAAW) 2021. D and rare nuclides keep their own mass: they are not a natural mixture. */
const standardAtomicWeights: Readonly<Record<string, number>> = {
  H: 1.008,
  C: 12.011,
  N: 14.007,
  O: 15.999,
  F: 18.998403162,
  Cl: 35.45,
  Br: 79.904,
  I: 126.90447,
};

/** Electron mass in u, CODATA 2022. */
const electronMassU = 5.485799090441e-4;

/** Mass of a nuclide in u as the course prescribes it: of the isotope, of the natural element, or of the bare nucleus. */
export function massOfNuclideU(nuclide: Nuclide, masses: MassKind): number {
  switch (masses) {
    case 'isotopic':
      return nuclide.massU;
    case 'nuclear':
      return nuclide.massU - nuclide.atomicNumber * electronMassU;
    case 'average':
      return nuclide.element === 'D' || nuclide.name === 'D'
        ? nuclide.massU
        : (standardAtomicWeights[nuclide.element] ?? nuclide.massU);
  }
}

/** Reduced mass μ = m₁m₂/(m₁ + m₂), u. */
export function reducedMassOf(isotopologue: Isotopologue, masses: MassKind): number {
  const [a, b] = isotopologue.nuclides.map((n) => massOfNuclideU(n, masses)) as [number, number];
  return (a * b) / (a + b);
}
