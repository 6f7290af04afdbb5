import type { Reason } from '../units/types.ts';
import { decimalsOf, findEvenGrid, hasUnevenSteps } from './even-grid.ts';
import { counted, refuse } from './refusal.ts';
import type { AbscissaKind } from './types.ts';
import { abscissaOf, lacksWavelengthUnit } from './words.ts';

export interface AbscissaDecision {
  readonly kind: AbscissaKind;
  readonly reason: string;
  readonly notes: readonly Reason[];
}

const names: Record<AbscissaKind, string> = {
  'wavenumber-per-cm': 'wavenumbers in cm⁻¹',
  'wavelength-um': 'wavelengths in µm',
  'wavelength-nm': 'wavelengths in nm',
};

function rangeText(least: number, greatest: number): string {
  return `${Number(least.toPrecision(6))} to ${Number(greatest.toPrecision(6))}`;
}

/** Whether values of this size can be what `kind` says, for an infrared spectrum (0.7 to 100 µm). */
function isPlausible(kind: AbscissaKind, least: number, greatest: number): boolean {
  if (kind === 'wavelength-um') return least > 0.2 && greatest < 150;
  if (kind === 'wavelength-nm') return least > 200 && greatest < 150_000;
  return greatest > 150 && least < 20_000;
}

/** Whether values that are uneven as they stand are even as wavenumbers 1e7/x: how an interferometer makes them. */
function isEvenInWavenumber(x: Float64Array): boolean {
  const spread = (values: Float64Array): number => {
    const n = values.length;
    const early = Math.abs(values[Math.floor(n / 10)]! - values[0]!);
    const late = Math.abs(values[n - 1]! - values[n - 1 - Math.floor(n / 10)]!);
    return Math.abs(early - late) / Math.max(early, late);
  };
  return x.length >= 100 && spread(x) > 0.02 && spread(x.map((value) => 1e7 / value)) < 0.002;
}

/** µm, nm or cm-1, from the label and the size of the (ascending) values. */
export function decideAbscissa(x: Float64Array, label: string): AbscissaDecision {
  const least = x[0]!;
  const greatest = x[x.length - 1]!;
  const range = rangeText(least, greatest);
  let labelled = abscissaOf(label);
  if (labelled === 'wavelength-um' && lacksWavelengthUnit(label)) {
    labelled = greatest < 150 ? 'wavelength-um' : 'wavelength-nm';
  }
  const bySize: AbscissaKind = greatest < 60 && least > 0.2 ? 'wavelength-um' : 'wavenumber-per-cm';
  const byData = bySize === 'wavenumber-per-cm' && isEvenInWavenumber(x) ? 'wavelength-nm' : bySize;
  if (labelled && isPlausible(labelled, least, greatest)) {
    return {
      kind: labelled,
      reason: `The file calls its abscissa ${names[labelled]} (${range}).`,
      notes: [],
    };
  }
  if (!isPlausible(byData, least, greatest)) {
    refuse(
      'abscissa-not-infrared',
      `The abscissa runs from ${range}, which is no infrared range in cm⁻¹, µm or nm: check that the first column holds the wavenumbers.`,
    );
  }
  if (labelled) {
    const text = `The file calls its abscissa ${names[labelled]}, but values from ${range} can only be ${names[byData]}, and were taken as such.`;
    return { kind: byData, reason: text, notes: [{ code: 'abscissa-label-contradicts', text }] };
  }
  const why = byData === 'wavelength-nm' ? 'are evenly spaced only when read as' : 'have the size of';
  return {
    kind: byData,
    reason: `The file does not name its abscissa; values from ${range} ${why} ${names[byData]}.`,
    notes: [],
  };
}

/**
 * Wavenumber of a wavelength in vacuum, cm-1; for wavelengths in standard air times the refractive index, by
 * P. E. Ciddor, Appl. Opt. 35 (1996) 1566, equation 1 (beyond 1.7 µm an extrapolation, good to 1e-7).
 */
export function wavenumberOf(wavelength: number, kind: AbscissaKind, inAir: boolean): number {
  const micrometres = kind === 'wavelength-nm' ? wavelength / 1000 : wavelength;
  const vacuum = 1e4 / micrometres;
  if (!inAir) return vacuum;
  const square = 1 / (micrometres * micrometres);
  const refractivity = (5792105 / (238.0185 - square) + 167917 / (57.362 - square)) * 1e-8;
  return vacuum / (1 + refractivity);
}

/** Puts ascending abscissas that were rounded on writing back on their even grid, where one explains all of them. */
export function recoverGrid(x: Float64Array): { x: Float64Array; notes: Reason[] } {
  const decimals = decimalsOf(x);
  if (decimals === null || decimals > 5 || !hasUnevenSteps(x)) return { x, notes: [] };
  const unit = 10 ** -decimals;
  const grid = findEvenGrid(x, unit);
  if (!grid || grid.step > 60 * unit) return { x, notes: [] };
  const even = Float64Array.from(grid.indices, (index) => grid.first + grid.step * index);
  const missing = grid.indices.at(-1)! + 1 - x.length;
  return {
    x: even,
    notes: [
      {
        code: 'grid-recovered',
        text:
          `The abscissa is written to ${counted(decimals, 'decimal')}, so its steps alternate; all ${x.length} values come from an even step of ` +
          `${Number(grid.step.toPrecision(8))} by rounding and were put back on it (largest shift ${grid.largestDeviation.toPrecision(2)}${missing > 0 ? `; ${counted(missing, 'grid point')} missing` : ''}).`,
      },
    ],
  };
}
