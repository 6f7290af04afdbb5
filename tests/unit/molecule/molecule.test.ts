import { describe, expect, it } from 'vitest';
import {
  bandConstantsFrom,
  bondLengthFactor,
  bondLengthPm,
  forceConstantFactor,
  isotopologue,
  isotopologuesOf,
  lineWavenumberPerCm,
  listedGases,
  momentOfInertiaFactor,
  publishedConstants,
  reducedMassU,
} from '../../../shared-core/molecule/index.ts';

describe('physical constants', () => {
  it('give the factors of the trade', () => {
    // CODATA 2022: h/(8π²c u) = 16.85762916808777 u Å² cm-1.
    expect(bondLengthFactor / 1e4).toBeCloseTo(16.85762916808777, 7);
    expect(forceConstantFactor).toBeCloseTo(5.89183e-5, 9);
    expect(momentOfInertiaFactor * 1e46).toBeCloseTo(2.799275, 6);
  });
});

describe('isotopologues', () => {
  it('are read from their names', () => {
    expect(isotopologue('H35Cl')!.gas).toBe('HCl');
    expect(isotopologue('HF')!.name).toBe('H19F');
    expect(isotopologue('CO')!.name).toBe('12C16O');
    expect(isotopologue('H2O')).toBeNull();
    expect(isotopologue('water')).toBeNull();
    expect(isotopologuesOf('HBr').map((i) => i.name)).toEqual(['H79Br', 'H81Br']);
  });

  it('have the reduced mass of their atoms, by each kind of mass', () => {
    const hcl = isotopologue('H35Cl')!;
    expect(hcl.reducedMassU).toBeCloseTo(0.979593, 6);
    // r changes by × 0.99972 with average masses and × 1.00027 with nuclear ones.
    expect(Math.sqrt(hcl.reducedMassU / reducedMassU(hcl, 'average'))).toBeCloseTo(0.99972, 4);
    expect(Math.sqrt(hcl.reducedMassU / reducedMassU(hcl, 'nuclear'))).toBeCloseTo(1.00027, 5);
  });
});

describe('published constants', () => {
  // Published bond lengths, pm: Huber & Herzberg 1979 (HBr and HI from memory): a constant is used only where Be, re and the masses agree.
  const lengths: Record<string, number> = {
    H35Cl: 127.455,
    D35Cl: 127.4581,
    '12C16O': 112.8323,
    H19F: 91.6808,
    D19F: 91.694,
    H81Br: 141.4435,
    H127I: 160.916,
  };
  it.each(Object.entries(lengths))('of %s agree with the published bond length', (name, length) => {
    const r = bondLengthPm(
      publishedConstants(name)!.rotationalConstantEquilibriumPerCm,
      isotopologue(name)!.reducedMassU,
    );
    expect(Math.abs(r / length - 1)).toBeLessThan(3e-4);
  });

  it('give the published fundamentals of HCl and DCl', () => {
    const hcl = bandConstantsFrom(publishedConstants('H35Cl')!, 1);
    expect(hcl.bandOriginPerCm).toBeCloseTo(2885.977, 2);
    expect(hcl.rotationalConstantLowerPerCm).toBeCloseTo(10.44025, 3);
    expect(hcl.rotationalConstantUpperPerCm).toBeCloseTo(10.13623, 3);
    const dcl = bandConstantsFrom(publishedConstants('D35Cl')!, 1);
    expect(dcl.bandOriginPerCm).toBeCloseTo(2091.061, 2);
    expect(dcl.rotationalConstantUpperPerCm).toBeCloseTo(5.27981, 3);
  });

  it('put R(0) and P(1) of CO where they are published', () => {
    // HITRAN: P(1) 2139.426073, and R(0) 2147.081 cm-1.
    const co = bandConstantsFrom(publishedConstants('12C16O')!, 1);
    expect(lineWavenumberPerCm(co, -1)).toBeCloseTo(2139.426, 2);
    expect(() => lineWavenumberPerCm(co, 0)).toThrow(/m: expected/);
  });

  it('stand for every listed gas', () => {
    for (const gas of listedGases) {
      for (const i of isotopologuesOf(gas)) expect(publishedConstants(i.name)).not.toBeNull();
    }
  });
});
