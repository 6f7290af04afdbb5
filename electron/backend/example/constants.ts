/**
 * Constants that the generator of invented spectra stands on. It keeps its own table so that it shares no code with
 * the fitting side; the values are those published.
 */

/** Second radiation constant hc/k, cm K (CODATA 2022). */
export const secondRadiationConstantCmK = 1.4387768775039338;

interface Atom {
  readonly massU: number;
  /** Natural abundance (IUPAC representative values; D as prepared: 1). */
  readonly abundance: number;
}

/** Atomic masses: AME2020, Wang et al., Chinese Physics C 45 (2021) 030003. 18O from memory. */
const atoms: Readonly<Record<string, Atom>> = {
  H: { massU: 1.007825031898, abundance: 1 },
  D: { massU: 2.014101777844, abundance: 1 },
  '12C': { massU: 12, abundance: 0.9893 },
  '13C': { massU: 13.00335483534, abundance: 0.0107 },
  '16O': { massU: 15.99491461926, abundance: 0.99757 },
  '18O': { massU: 17.99915961214, abundance: 0.00205 },
  '19F': { massU: 18.99840316207, abundance: 1 },
  '35Cl': { massU: 34.968852694, abundance: 0.7576 },
  '37Cl': { massU: 36.965902573, abundance: 0.2424 },
  '79Br': { massU: 78.918337574, abundance: 0.5069 },
  '81Br': { massU: 80.916288197, abundance: 0.4931 },
  '127I': { massU: 126.904472592, abundance: 1 },
};

/** Equilibrium constants, cm-1: term values in powers of v + 1/2 and J(J + 1). */
export interface EquilibriumConstants {
  readonly omegaE: number;
  readonly omegaExe: number;
  readonly omegaEye: number;
  readonly be: number;
  readonly alphaE: number;
  readonly gammaE: number;
  readonly de: number;
}

interface Parent extends EquilibriumConstants {
  readonly atoms: readonly [string, string];
}

/**
 * Huber and Herzberg, Constants of Diatomic Molecules (1979), as tabulated in the NIST Chemistry WebBook, for omegaE,
 * omegaExe, Be, alphaE, De. omegaEye and gammaE are set so that the fundamental agrees with the one published
 * (H35Cl 2885.977, B0 10.44025, B1 10.13623; D35Cl 2091.061, 5.39227, 5.27981); CO: Guelachvili et al. 1983.
 * H81Br partly, H127I from memory (Be such that it agrees with the published re and masses).
 */
const parents: Readonly<Record<string, Parent>> = {
  HCl: { atoms: ['H', '35Cl'], omegaE: 2990.9463, omegaExe: 52.8186, omegaEye: 0.2055, be: 10.593416, alphaE: 0.307181, gammaE: 0.0017724, de: 0.00053194 },
  DCl: { atoms: ['D', '35Cl'], omegaE: 2145.163, omegaExe: 27.1825, omegaEye: 0.0809, be: 5.448794, alphaE: 0.113291, gammaE: 0.00043, de: 0.000139 },
  CO: { atoms: ['12C', '16O'], omegaE: 2169.81358, omegaExe: 13.28831, omegaEye: 0.01041444739, be: 1.93128087, alphaE: 0.01750441, gammaE: 5.49e-7, de: 6.12147e-6 },
  HF: { atoms: ['H', '19F'], omegaE: 4138.32, omegaExe: 89.88, omegaEye: 0.9, be: 20.9557, alphaE: 0.798, gammaE: 0.0127, de: 0.002151 },
  DF: { atoms: ['D', '19F'], omegaE: 2998.192, omegaExe: 45.761, omegaEye: 0.25, be: 11.0102, alphaE: 0.3017, gammaE: 0.0032, de: 0.000594 },
  HBr: { atoms: ['H', '81Br'], omegaE: 2648.975, omegaExe: 45.217, omegaEye: 0, be: 8.46488, alphaE: 0.2333, gammaE: 0.0008, de: 0.00034575 },
  HI: { atoms: ['H', '127I'], omegaE: 2309.014, omegaExe: 39.6435, omegaEye: -0.02, be: 6.5111, alphaE: 0.1689, gammaE: 0, de: 0.0002069 },
}; // prettier-ignore

/** Gases that the generator knows, with the isotopologues of each, the most abundant first. */
const isotopologuesOfGas = {
  HCl: [['H', '35Cl'], ['H', '37Cl']],
  DCl: [['D', '35Cl'], ['D', '37Cl']],
  HBr: [['H', '79Br'], ['H', '81Br']],
  DBr: [['D', '79Br'], ['D', '81Br']],
  HF: [['H', '19F']],
  DF: [['D', '19F']],
  HI: [['H', '127I']],
  CO: [['12C', '16O'], ['13C', '16O']],
} as const; // prettier-ignore

export type GasName = keyof typeof isotopologuesOfGas;
export const gasNames = Object.keys(isotopologuesOfGas) as GasName[];

export interface SimulatedIsotopologue {
  readonly name: string;
  readonly gas: GasName;
  readonly reducedMassU: number;
  readonly massU: number;
  /** Share among the isotopologues listed for the gas, natural. */
  readonly share: number;
  readonly constants: EquilibriumConstants;
}

function reducedMass(pair: readonly [string, string]): number {
  const [a, b] = [atoms[pair[0]]!.massU, atoms[pair[1]]!.massU];
  return (a * b) / (a + b);
}

/** Mass scaling: omegaE by rho, omegaExe by rho^2, omegaEye by rho^3, Be by rho^2, alphaE by rho^3, gammaE and De by rho^4. */
function scaled(parent: Parent, reducedMassU: number): EquilibriumConstants {
  const rho = Math.sqrt(reducedMass(parent.atoms) / reducedMassU);
  return {
    omegaE: parent.omegaE * rho,
    omegaExe: parent.omegaExe * rho ** 2,
    omegaEye: parent.omegaEye * rho ** 3,
    be: parent.be * rho ** 2,
    alphaE: parent.alphaE * rho ** 3,
    gammaE: parent.gammaE * rho ** 4,
    de: parent.de * rho ** 4,
  };
}

/** The isotopologues of a gas with masses, natural shares and (mass-scaled) published constants. */
export function isotopologuesOf(gas: GasName): readonly SimulatedIsotopologue[] {
  const pairs: readonly (readonly [string, string])[] = isotopologuesOfGas[gas];
  const abundances = pairs.map(([a, b]) => atoms[a]!.abundance * atoms[b]!.abundance);
  const total = abundances.reduce((sum, each) => sum + each, 0);
  const parent = parents[gas] ?? parents[gas === 'DBr' ? 'HBr' : gas]!;
  return pairs.map((pair, index) => {
    const reducedMassU = reducedMass(pair);
    return {
      name: pair.join(''),
      gas,
      reducedMassU,
      massU: atoms[pair[0]]!.massU + atoms[pair[1]]!.massU,
      share: abundances[index]! / total,
      constants: scaled(parent, reducedMassU),
    };
  });
}
