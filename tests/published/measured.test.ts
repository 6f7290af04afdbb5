import { existsSync, readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { fitBand } from '../../shared-core/assignment/fit-band.ts';
import { assignLines } from '../../shared-core/assignment/assign-lines.ts';
import { sexticConstantPerCm } from '../../shared-core/molecule/index.ts';
import { makeReference, plainSettings, type FileReference } from '../../shared-core/reference/index.ts';

const folder = '../shared/reference-data';
const absent = !existsSync(folder);

function reference(name: string): FileReference {
  return makeReference({
    files: [{ name, bytes: new Uint8Array(readFileSync(`${folder}/spectra/${name}`)) }],
    settings: plainSettings,
  });
}

/** Published fundamentals: H35Cl B_0 10.44025, B_1 10.13623, ν̃0 2885.977; D35Cl 5.39227, 5.27981, 2091.061 cm-1. */
const published = {
  H35Cl: { B0: 10.44025, B1: 10.13623, nu0: 2885.977 },
  D35Cl: { B0: 5.39227, B1: 5.27981, nu0: 2091.061 },
};

function agrees(ref: FileReference, name: keyof typeof published): void {
  const own = ref.isotopologues[name]!;
  const known = published[name];
  expect(ref.isotopologueReliability[name]).toBe('sound');
  expect(Math.abs(own.B0!.value / known.B0 - 1)).toBeLessThan(2e-4);
  expect(Math.abs(own.B1!.value / known.B1 - 1)).toBeLessThan(2e-4);
  expect(Math.abs(own.alphaE!.value / (known.B0 - known.B1) - 1)).toBeLessThan(0.01);
  // Their axes are off; it cancels in marking.
  expect(Math.abs(1e6 * (own.nu0!.value / known.nu0 - 1))).toBeLessThan(200);
}

describe.skipIf(absent)('measured spectra, assigned and fitted blind', () => {
  it('give the published constants of HCl from an optically thin spectrum', () => {
    const ref = reference('hcl-thin.csv');
    expect(ref.reliability).toBe('sound');
    agrees(ref, 'H35Cl');
    const pair = ref.isotopologues['H37Cl']!.re!.value / ref.best.re!.value - 1;
    expect(Math.abs(pair)).toBeLessThan(2e-4);
  });

  it('give HCl and DCl, both chlorines and the overtones, from a mixed cell with saturated lines and foreign gases', () => {
    const ref = reference('hcl-dcl-mixed-cell.csv');
    agrees(ref, 'H35Cl');
    agrees(ref, 'D35Cl');
    expect(Object.keys(ref.isotopologues).sort()).toEqual(['D35Cl', 'D37Cl', 'H35Cl', 'H37Cl']);
    // ωe 2990.95 and 2145.16 cm-1 (Huber & Herzberg 1979); two levels leave ωeye out, hence 0.1 %.
    expect(Math.abs(ref.isotopologues['H35Cl']!.omegaE!.value / 2990.9463 - 1)).toBeLessThan(1e-3);
    expect(Math.abs(ref.isotopologues['D35Cl']!.omegaE!.value / 2145.163 - 1)).toBeLessThan(1e-3);
    const pair = ref.isotopologues['D37Cl']!.re!.value / ref.isotopologues['D35Cl']!.re!.value - 1;
    expect(Math.abs(pair)).toBeLessThan(2e-4);
  });

  it('are the same for the same bytes', () => {
    expect(reference('hcl-thin.csv')).toEqual(reference('hcl-thin.csv'));
  });
});

describe.skipIf(absent)('line positions of CO (HITRAN extracts)', () => {
  const rows = absent
    ? []
    : readFileSync(`${folder}/co-lines.csv`, 'utf8')
        .trim()
        .split('\n')
        .slice(1)
        .map((row) => row.split(','));
  const linesOf = (
    isotopologue: string,
    band: string,
    most: number,
  ): { m: number; wavenumberPerCm: number; uncertaintyPerCm: number }[] =>
    rows
      .filter((r) => r[0] === isotopologue && r[1] === band)
      .map((r) => ({
        m: r[3] === 'R' ? Number(r[2]) + 1 : -Number(r[2]),
        wavenumberPerCm: Number(r[4]),
        uncertaintyPerCm: 1e-5,
      }))
      .filter((l) => Math.abs(l.m) <= most);

  it('give B_0 and B_1 of 12C16O as its equilibrium constants have them', () => {
    const h = sexticConstantPerCm(6.12147e-6, 1.93128087, 0.01750441, 2169.81358);
    const fit = fitBand(linesOf('12C16O', '1-0', 30), {
      distortion: 'free',
      sextic: [h, h],
      scale: 'larger',
    });
    expect(fit.outcome).toBe('converged');
    if (fit.outcome !== 'converged') return;
    // Be 1.93128087, αe 0.01750441 (Huber & Herzberg 1979), γe 5.5e-7 from memory; origin 2143.2711 cm-1 (Guelachvili et al. 1983).
    expect(fit.constants.rotationalConstantLowerPerCm).toBeCloseTo(1.93128087 - 0.01750441 / 2, 5);
    expect(fit.constants.rotationalConstantUpperPerCm).toBeCloseTo(1.93128087 - 1.5 * 0.01750441, 5);
    expect(fit.constants.bandOriginPerCm).toBeCloseTo(2143.2711, 3);
    expect(fit.constants.centrifugalConstantLowerPerCm).toBeCloseTo(6.12147e-6, 8);
  });

  it('are numbered blind, 13C16O beside 12C16O', () => {
    const found = ['12C16O', '13C16O']
      .flatMap((name) =>
        linesOf(name, '1-0', name === '12C16O' ? 34 : 22).map((l) => ({
          ...l,
          strong: name === '12C16O' ? 1 : 0.011,
        })),
      )
      .sort((a, b) => a.wavenumberPerCm - b.wavenumberPerCm)
      .map((l) => ({
        wavenumberPerCm: l.wavenumberPerCm,
        uncertaintyPerCm: 0.002,
        peakAbsorbance: l.strong * Math.abs(l.m) * Math.exp((-1.4388 * 1.9225 * l.m * l.m) / 296),
        integratedAbsorbance: 0.1,
        fullWidthHalfHeightPerCm: 0.25,
        signalToNoise: 500 * l.strong,
        saturated: false,
        blended: false,
      }));
    const assignment = assignLines(found);
    expect(assignment.bands.map((b) => b.isotopologue.name).sort()).toEqual(['12C16O', '13C16O']);
    for (const band of assignment.bands) {
      const known = new Map(linesOf(band.isotopologue.name, '1-0', 34).map((l) => [l.m, l.wavenumberPerCm]));
      for (const line of band.lines) expect(line.wavenumberPerCm).toBe(known.get(line.m));
    }
  });
});
