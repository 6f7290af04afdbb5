import { createRandom } from '../../electron/backend/example/random.ts';
import type { SimulatedSpectrum, TrueBand } from '../../electron/backend/example/simulate.ts';
import type { AssignedLine } from '../../shared-core/assignment/types.ts';
import type { Constants, FileReference } from '../../shared-core/reference/types.ts';

const lineError = 0.002;

function linesOf(band: TrueBand, seed: number): AssignedLine[] {
  const random = createRandom(seed, 71);
  const tallest = Math.max(...band.lines.map((line) => line.peakAbsorbance));
  return band.lines
    .filter((line) => line.peakAbsorbance > 0.02 * tallest)
    .map((line) => ({
      id: `${band.isotopologue}/${band.band}/${line.m > 0 ? 'R' : 'P'}/${line.m > 0 ? line.m - 1 : -line.m}`,
      isotopologue: band.isotopologue,
      band: band.band,
      branch: line.m > 0 ? 'R' : 'P',
      jLower: line.m > 0 ? line.m - 1 : -line.m,
      m: line.m,
      wavenumberPerCm: line.wavenumberPerCm + lineError * random.normal(),
      uncertaintyPerCm: lineError,
      peakAbsorbance: line.peakAbsorbance,
      saturated: false,
      blended: false,
      used: true,
      leftOutBecause: null,
      residualPerCm: 0,
    }));
}

function constantsOf(band: TrueBand): Constants {
  const measured = (value: number, uncertainty: number) => ({ value, uncertainty, unit: 'cm-1' as const });
  const c = band.constants;
  return {
    nu0: measured(c.bandOriginPerCm, 8e-4),
    B0: measured(c.rotationalConstantLowerPerCm, 8e-5),
    B1: measured(c.rotationalConstantUpperPerCm, 8e-5),
    Be: measured(band.rotationalConstantEquilibriumPerCm, 1e-4),
    alphaE: measured(band.alphaEPerCm, 5e-5),
    D: measured((c.centrifugalConstantLowerPerCm + c.centrifugalConstantUpperPerCm) / 2, 3e-7),
  };
}

/** A sound reference made from what is true of a simulated spectrum: to measure marking by itself. */
export function truthReference(spectrum: SimulatedSpectrum): FileReference {
  const bands = spectrum.truth.bands.filter((band) => band.band === '1-0');
  const main = bands[0]!;
  return {
    reliability: 'sound',
    reasons: [],
    checks: [],
    axisScalePpm: spectrum.truth.options.scaleErrorPpm ?? 0,
    ordinate: 'transmittance',
    ordinateReason: 'simulated',
    isotopologue: main.isotopologue,
    best: constantsOf(main),
    isotopologues: Object.fromEntries(bands.map((band) => [band.isotopologue, constantsOf(band)])),
    isotopologueReliability: Object.fromEntries(bands.map((band) => [band.isotopologue, 'sound'])),
    isotopologueReasons: Object.fromEntries(bands.map((band) => [band.isotopologue, []])),
    isotopologueChecks: Object.fromEntries(bands.map((band) => [band.isotopologue, []])),
    runnerUp: null,
    lines: bands.flatMap((band, index) => linesOf(band, spectrum.truth.options.seed + index)),
    model: 'simulated truth',
    notes: [],
    coreVersion: 'simulated',
  };
}
