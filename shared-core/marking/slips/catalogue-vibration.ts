import { forceConstantWavenumber, type Values } from '../../reference/methods/derive.ts';
import { forceConstantNPerM } from '../../reference/methods/physical-factors.ts';
import { alone, bothWays, carriedOn, needing, type SlipDefinition, type Steps } from './definition.ts';

/** J mol-1 and eV per cm-1: hcN_A and hc/e (CODATA 2022). */
const kiloJoulePerMolPerCm = 0.01196265657;
const electronVoltPerCm = 1.239841984e-4;
const joulePerCm = 1.986445857e-23;

/** Slips in ωe, ωexe, k and the dissociation energies. */
export const vibrationSlips: readonly SlipDefinition[] = [
  {
    code: 'k-from-nu0',
    family: 'vibration',
    weight: 2,
    what: 'k was worked out from ν̃0 where ωe is prescribed',
    variants: ({ settings }) =>
      forceConstantWavenumber(settings) === 'omegaE'
        ? [alone('k × (ν̃0/ωe)²', { k: needing(['nu0', 'mu'], ({ nu0, mu }) => forceConstantNPerM(nu0, mu)) })]
        : [],
  },
  {
    code: 'k-from-omega',
    family: 'vibration',
    weight: 2,
    what: 'k was worked out from ωe where ν̃0 is prescribed',
    variants: ({ settings, handbook }) =>
      forceConstantWavenumber(settings) === 'nu0'
        ? [
            alone('k × (ωe/ν̃0)², ωe from the same work', {
              k: needing(['omegaE', 'mu'], ({ omegaE, mu }) => forceConstantNPerM(omegaE, mu)),
            }),
            ...(handbook === null
              ? []
              : [
                  alone('k × (ωe/ν̃0)², ωe from a handbook', {
                    k: needing(['mu'], ({ mu }) => forceConstantNPerM(handbook.omegaE, mu)),
                  }),
                  alone('k × (ωe/ν̃0)², ωe = ν̃0 + 2ωexe with a handbook ωexe', {
                    k: needing(['nu0', 'mu'], (v) => forceConstantNPerM(v.nu0 + 2 * handbook.omegaExe, v.mu)),
                  }),
                ]),
          ]
        : [],
  },
  omega('omega-is-nu0', 1.5, 'ν̃0 was given as ωe', 'ωe − 2ωexe', 0),
  omega('omega-sign', 1, 'ωe was taken as ν̃0 − 2ωexe', 'ωe − 4ωexe', -2),
  omega('omega-lost-two', 1.5, 'ωe was taken as ν̃0 + ωexe', 'ωe − ωexe', 1),
  anharmonicity('anharmonicity-double', 1, 'ωexe is twice what it should be', '2ωexe', (x) => 2 * x),
  anharmonicity('anharmonicity-sign', 0.7, 'ωexe has the wrong sign', '−ωexe', (x) => -x),
  {
    code: 'anharmonicity-ratio',
    family: 'vibration',
    weight: 0.7,
    what: 'xe was given in place of ωexe',
    variants: () => [
      alone('ωexe/ωe', { omegaExe: needing(['omegaExe', 'omegaE'], (v) => v.omegaExe / v.omegaE) }),
    ],
  },
  {
    code: 'pair-ratio-unrooted',
    family: 'vibration',
    weight: 1,
    what: 'The mass ratio of the pair was used without the root, or upside down',
    variants: ({ settings }) =>
      settings.anharmonicityFrom === 'isotope-pair'
        ? [
            carriedOn(
              'ρ² in place of ρ',
              pairWith((rho) => rho ** 2),
            ),
            carriedOn(
              '1/ρ in place of ρ',
              pairWith((rho) => 1 / rho),
            ),
          ]
        : [],
  },
  {
    code: 'dissociation-de-for-d0',
    family: 'vibration',
    weight: 1,
    what: 'De was given as D0',
    variants: () => [
      alone('De', { D0: needing(['De'], ({ De }) => De) }),
      alone('De − ωe/2', { D0: needing(['De', 'omegaE'], (v) => v.De - v.omegaE / 2) }),
    ],
  },
  {
    code: 'dissociation-from-nu0',
    family: 'vibration',
    weight: 1,
    what: 'The dissociation energy was worked out from ν̃0',
    variants: () =>
      bothWays('ν̃0²/(4ωexe)', { De: needing(['nu0', 'omegaExe'], (v) => v.nu0 ** 2 / (4 * v.omegaExe)) }),
  },
  {
    code: 'dissociation-unit',
    family: 'vibration',
    weight: 1,
    what: 'The dissociation energy is in another unit',
    variants: () =>
      ([['kJ/mol', kiloJoulePerMolPerCm], ['eV', electronVoltPerCm], ['J', joulePerCm]] as const).map(([unit, f]) =>
        alone(`in ${unit}`, { De: needing(['De'], ({ De }) => f * De), D0: needing(['D0'], ({ D0 }) => f * D0) }),
      ), // prettier-ignore
  },
];

function omega(code: string, weight: number, what: string, formula: string, times: number): SlipDefinition {
  const omegaE = needing(['nu0', 'omegaExe'], (v) => v.nu0 + times * v.omegaExe);
  return { code, family: 'vibration', weight, what, variants: () => bothWays(formula, { omegaE }) };
}

function anharmonicity(
  code: string,
  weight: number,
  what: string,
  formula: string,
  change: (x: number) => number,
): SlipDefinition {
  return {
    code,
    family: 'vibration',
    weight,
    what,
    variants: ({ settings, handbook }) => {
      const own = (have: Values): number | undefined => have.omegaExe ?? handbook?.omegaExe;
      const right = (have: Values, nu02: number | undefined): number | null =>
        have.nu0 === undefined || nu02 === undefined ? null : have.nu0 - nu02 / 2;
      const omegaExe: Steps['omegaExe'] = (have, c) => {
        const x =
          settings.anharmonicityFrom === 'given'
            ? settings.anharmonicityPerCm
            : right(have, have.nu02 ?? c.overtone?.nu0);
        return x === null ? null : change(x);
      };
      return [
        carriedOn(formula, { omegaExe }),
        alone(`${formula}, not carried on`, {
          omegaExe: (have) => {
            const x = own(have);
            return x === undefined ? null : change(x);
          },
        }),
      ];
    },
  };
}

function pairWith(change: (rho: number) => number): Steps {
  return {
    omegaExe: (have, c) => {
      if (have.nu0 === undefined || have.mu === undefined || c.partner === null) return null;
      const rho = change(Math.sqrt(have.mu / c.partner.reducedMassU));
      const omegaE = (rho * rho * have.nu0 - c.partner.nu0) / (rho * rho - rho);
      return (omegaE - have.nu0) / 2;
    },
  };
}
