import { isotopologue } from './isotopologue.ts';
import { scaleConstants } from './mass-scaling.ts';
import type { PublishedConstants } from './types.ts';

const huberHerzberg =
  'Huber & Herzberg, Constants of Diatomic Molecules (1979), as tabulated in the NIST Chemistry WebBook (SRD 69)';

interface Row {
  readonly omega: number;
  readonly omegaX: number;
  readonly omegaY: number;
  readonly b: number;
  readonly alpha: number;
  readonly gamma: number;
  readonly d: number;
  readonly source: string;
  readonly openShell?: boolean;
}

/**
 * Equilibrium constants, cm-1. Where ωeye or γe is not published it is set so that the published band origin or B_v comes out
 * (HCl: ν̃0 2885.977, B_0 10.44025, B_1 10.13623; DCl: 2091.061, 5.39227, 5.27981).
 */
const rows: Readonly<Record<string, Row>> = {
  H35Cl: { omega: 2990.9463, omegaX: 52.8186, omegaY: 0.2055, b: 10.593416, alpha: 0.307181, gamma: 0.0017724, d: 0.00053194, source: huberHerzberg },
  D35Cl: { omega: 2145.163, omegaX: 27.1825, omegaY: 0.0809, b: 5.448794, alpha: 0.113291, gamma: 0.00043, d: 0.000139, source: `${huberHerzberg}; D_e from memory` },
  '12C16O': { omega: 2169.81358, omegaX: 13.28831, omegaY: 0.01041444739, b: 1.93128087, alpha: 0.01750441, gamma: 5.49e-7, d: 6.12147e-6, source: `${huberHerzberg}; ωeye: Guelachvili et al. 1983` },
  H19F: { omega: 4138.32, omegaX: 89.88, omegaY: 0.9, b: 20.9557, alpha: 0.798, gamma: 0.0127, d: 0.002151, source: `${huberHerzberg}; ωeye and γe from memory` },
  D19F: { omega: 2998.192, omegaX: 45.761, omegaY: 0.25, b: 11.0102, alpha: 0.3017, gamma: 0.0032, d: 0.000594, source: `${huberHerzberg}; ωeye and γe from memory` },
  H81Br: { omega: 2648.975, omegaX: 45.217, omegaY: 0, b: 8.46488, alpha: 0.2333, gamma: 0.0008, d: 0.00034575, source: 'partly confirmed; nominally Huber & Herzberg 1979; γe from memory' },
  // The published "Be" 6.426365 is B_0 (it disagrees with the published re); Be = B_0 + αe/2.
  H127I: { omega: 2309.014, omegaX: 39.6435, omegaY: -0.02, b: 6.5111, alpha: 0.1689, gamma: 0, d: 0.0002069, source: `${huberHerzberg} (ωe, ωexe, ωeye); Be, αe, D from memory` },
  '14N16O': { omega: 1904.204, omegaX: 14.075, omegaY: 0, b: 1.67195, alpha: 0.0171, gamma: 0, d: 5.4e-7, source: `${huberHerzberg}, lower component of the ²Π ground state`, openShell: true },
}; // prettier-ignore

/** Parents for mass scaling, by gas. */
const parents: Readonly<Record<string, string>> = {
  HCl: 'H35Cl', DCl: 'D35Cl', CO: '12C16O', HF: 'H19F', DF: 'D19F', HBr: 'H81Br', DBr: 'H81Br', HI: 'H127I', DI: 'H127I', NO: '14N16O',
}; // prettier-ignore

/** Gases whose bands are looked for without being asked. */
export const listedGases: readonly string[] = Object.keys(parents);

/**
 * Published constants of an isotopologue, mass-scaled from the published parent where it has none of its own.
 * They help to recognise a band; they never become an answer.
 *
 * @param name isotopologue, "H35Cl". @returns null where neither it nor a parent is listed.
 */
export function publishedConstants(name: string): PublishedConstants | null {
  const wanted = isotopologue(name);
  const parentName = wanted === null ? undefined : parents[wanted.gas];
  if (wanted === null || parentName === undefined) return null;
  const own = rows[wanted.name];
  const parent = constantsOf(parentName, rows[parentName]!);
  if (own !== undefined) return constantsOf(wanted.name, own);
  return scaleConstants(parent, isotopologue(parentName)!, wanted);
}

function constantsOf(name: string, row: Row): PublishedConstants {
  return {
    isotopologue: name,
    omegaEPerCm: row.omega,
    omegaExePerCm: row.omegaX,
    omegaEyePerCm: row.omegaY,
    rotationalConstantEquilibriumPerCm: row.b,
    alphaEPerCm: row.alpha,
    gammaEPerCm: row.gamma,
    centrifugalConstantPerCm: row.d,
    openShell: row.openShell ?? false,
    source: row.source,
  };
}
