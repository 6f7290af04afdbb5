import type { SimulatedSpectrum, TrueBand } from '../../electron/backend/example/simulate.ts';
import { writeSpectrum, type FileStyle } from '../../electron/backend/example/file-writer.ts';
import type { Constants, FileReference, MethodSettings } from '../../shared-core/reference/types.ts';
import type { SourceFile } from '../../shared-core/spectrum/types.ts';
import type { Bound } from './bound.ts';

/** "Wrong": on the file's own axis band origin off by more than 0.1 cm-1, Be by 0.15 % or alphaE by 3 %. */
export const wrongLimits = { bandOriginPerCm: 0.1, beRelative: 0.0015, alphaERelative: 0.03 } as const;

export const benchSettings: MethodSettings = {
  masses: 'isotopic',
  bondLengthFrom: 'Be',
  forceConstantFrom: 'nu0',
  anharmonicityFrom: null,
  anharmonicityPerCm: null,
};

/** The three errors of a reference that count. */
export interface Errors {
  readonly bandOriginPerCm: number;
  readonly rotationalConstantEquilibriumPerCm: number;
  readonly alphaEPerCm: number;
}

/** Errors of a set of constants against the truth of a band; null where one of the three is absent. */
export function errorsOf(constants: Constants, truth: TrueBand): Errors | null {
  const { nu0, Be, alphaE } = constants;
  if (!nu0 || !Be || !alphaE) return null;
  return {
    bandOriginPerCm: nu0.value - truth.constants.bandOriginPerCm,
    rotationalConstantEquilibriumPerCm: Be.value - truth.rotationalConstantEquilibriumPerCm,
    alphaEPerCm: alphaE.value - truth.alphaEPerCm,
  };
}

export function isWrong(errors: Errors, truth: TrueBand): boolean {
  return (
    Math.abs(errors.bandOriginPerCm) > wrongLimits.bandOriginPerCm ||
    Math.abs(errors.rotationalConstantEquilibriumPerCm) >
      wrongLimits.beRelative * truth.rotationalConstantEquilibriumPerCm ||
    Math.abs(errors.alphaEPerCm) > wrongLimits.alphaERelative * truth.alphaEPerCm
  );
}

/** What a sound reference says that is not true: one sentence per isotopologue, none where all is well. */
export function falsehoods(reference: FileReference, bands: readonly TrueBand[]): string[] {
  if (reference.reliability !== 'sound') return [];
  const found: string[] = [];
  for (const [name, constants] of Object.entries(reference.isotopologues)) {
    if ((reference.isotopologueReliability[name] ?? 'sound') !== 'sound') continue;
    const truth = bands.find((band) => band.isotopologue === name && band.band === '1-0');
    if (!truth) {
      if (constants.nu0) found.push(`${name} is not in the cell`);
      continue;
    }
    const errors = errorsOf(constants, truth);
    if (errors && isWrong(errors, truth)) {
      found.push(
        `${name}: nu0 ${errors.bandOriginPerCm.toFixed(4)} cm-1, Be ${((100 * errors.rotationalConstantEquilibriumPerCm) / truth.rotationalConstantEquilibriumPerCm).toFixed(3)} %, alphaE ${((100 * errors.alphaEPerCm) / truth.alphaEPerCm).toFixed(2)} %`,
      );
    }
  }
  if (reference.isotopologue !== null && !bands.some((b) => b.isotopologue === reference.isotopologue)) {
    found.push(`main isotopologue ${reference.isotopologue} is not in the cell`);
  }
  return found;
}

/** True where three times the bound stays inside what counts as wrong: the spectrum could be sound. */
export function boundAllows(bound: Bound, truth: TrueBand): boolean {
  return !isWrong(
    {
      bandOriginPerCm: 3 * bound.bandOriginPerCm,
      rotationalConstantEquilibriumPerCm: 3 * bound.rotationalConstantEquilibriumPerCm,
      alphaEPerCm: 3 * bound.alphaEPerCm,
    },
    truth,
  );
}

/** A style that loses nothing: transmittance with eight decimals. */
export const exactStyle: FileStyle = {
  format: 'delimited',
  separator: ',',
  decimalMark: '.',
  header: ['wavenumber (cm-1),transmittance'],
  encoding: 'utf-8',
  lineEnd: '\n',
  trailingSeparator: false,
  xDecimals: 6,
  yDecimals: 8,
  ordinate: 'transmittance',
  descending: false,
  extension: 'csv',
};

export function fileOf(
  spectrum: SimulatedSpectrum,
  style: FileStyle = exactStyle,
  clipAbsorbance?: number,
  name = 'simulated',
): SourceFile {
  return {
    name: `${name}.${style.extension}`,
    bytes: writeSpectrum(
      {
        title: name,
        wavenumberPerCm: spectrum.wavenumberPerCm,
        transmittance: spectrum.transmittance,
        resolutionPerCm: spectrum.truth.options.resolutionPerCm ?? 0.5,
        ...(clipAbsorbance === undefined ? {} : { clipAbsorbance }),
      },
      style,
    ),
  };
}
