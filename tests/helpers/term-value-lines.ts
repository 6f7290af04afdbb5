// Line positions from term values, written down apart from the core: F(J) = BJ(J+1) − D[J(J+1)]². No fit, no method.
import type { Isotopologue, Nuclide } from '../../shared-core/molecule/types.ts';
import type { CandidateLine } from '../../shared-core/reference/methods/line-sets.ts';

export interface BandForTests {
  readonly origin: number;
  readonly bLower: number;
  readonly bUpper: number;
  readonly dLower: number;
  readonly dUpper: number;
}

/** H35Cl 1-0: B_0, B_1 and ν̃0 as published for the fundamental; D_0, D_1 from memory. */
export const hydrogenChloride: BandForTests = {
  origin: 2885.977,
  bLower: 10.44025,
  bUpper: 10.13623,
  dLower: 5.2828e-4,
  dUpper: 5.2157e-4,
};

/** H35Cl 2-0: ν̃0 and B_2 from ωe, ωexe, ωeye, Be, αe of Huber & Herzberg (1979), γe from memory. */
export const hydrogenChlorideOvertone: BandForTests = {
  origin: 5667.98,
  bLower: 10.44025,
  bUpper: 9.8346,
  dLower: 5.2828e-4,
  dUpper: 5.15e-4,
};

/** D35Cl 1-0: B_0, B_1, ν̃0 as published for the fundamental; D from memory. */
export const deuteriumChloride: BandForTests = {
  origin: 2091.061,
  bLower: 5.39227,
  bUpper: 5.27981,
  dLower: 1.39e-4,
  dUpper: 1.38e-4,
};

const level = (B: number, D: number, J: number): number => B * J * (J + 1) - D * (J * (J + 1)) ** 2;

export function wavenumberOf(band: BandForTests, m: number): number {
  const lowerJ = m > 0 ? m - 1 : -m;
  const upperJ = m > 0 ? m : -m - 1;
  return band.origin + level(band.bUpper, band.dUpper, upperJ) - level(band.bLower, band.dLower, lowerJ);
}

export function linesOf(band: BandForTests, pLines: number, rLines: number = pLines): CandidateLine[] {
  const ms = [
    ...Array.from({ length: pLines }, (_, i) => -1 - i),
    ...Array.from({ length: rLines }, (_, i) => 1 + i),
  ];
  return ms.map((m) => ({
    m,
    wavenumberPerCm: wavenumberOf(band, m),
    uncertaintyPerCm: 0.002,
    used: true,
    blended: false,
    saturated: false,
  }));
}

// Masses: AME2020 (Wang et al. 2021).
const nuclide = (
  name: string,
  element: string,
  massNumber: number,
  massU: number,
  atomicNumber: number,
): Nuclide => ({
  name,
  element,
  massNumber,
  massU,
  abundance: 1,
  atomicNumber,
});
const hydrogen = nuclide('H', 'H', 1, 1.007825031898, 1);
const deuterium = nuclide('D', 'D', 2, 2.014101777844, 1);
const chlorine35 = nuclide('35Cl', 'Cl', 35, 34.968852694, 17);
const pair = (name: string, gas: string, a: Nuclide, b: Nuclide): Isotopologue => ({
  name,
  gas,
  nuclides: [a, b],
  reducedMassU: (a.massU * b.massU) / (a.massU + b.massU),
});

export const h35cl = pair('H35Cl', 'HCl', hydrogen, chlorine35);
export const d35cl = pair('D35Cl', 'DCl', deuterium, chlorine35);
