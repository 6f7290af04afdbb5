import { describe, expect, it } from 'vitest';
import { mistakeMargins } from '../../../shared-core/marking/mistake-margins.ts';
import { schemeOutlook } from '../../../shared-core/marking/scheme-outlook.ts';
import { starterScheme, starterSchemeFor } from '../../../shared-core/marking/starter-scheme.ts';
import type { MarkingScheme, QuantityRule } from '../../../shared-core/marking/types.ts';

const rule = (scheme: MarkingScheme, key: string): QuantityRule =>
  scheme.quantities.find((q) => q.key === key)!;

describe('starterScheme', () => {
  it('cuts tolerances to the mistake margin: CO re 0.1 / 0.2 %, Be at most 0.2 / 0.4 % (worked out beforehand: re margin 0.23 %, Be 0.45 %)', () => {
    const scheme = starterSchemeFor('CO fundamental');
    expect(rule(scheme, 're')).toMatchObject({ full: { relative: 0.001 }, part: { relative: 0.002 } });
    expect(rule(scheme, 'Be')).toMatchObject({ full: { relative: 0.002 }, part: { relative: 0.004 } });
  });

  it('keeps the fair defaults where the margin is wide: HCl re 0.2 / 0.5 %, Be 0.3 / 1 %', () => {
    const scheme = starterSchemeFor('HCl fundamental');
    expect(rule(scheme, 're')).toMatchObject({ full: { relative: 0.002 }, part: { relative: 0.005 } });
    expect(rule(scheme, 'Be')).toMatchObject({ full: { relative: 0.003 }, part: { relative: 0.01 } });
    expect(rule(scheme, 'nu0')).toMatchObject({ full: { absolute: 0.5 }, part: { absolute: 1.5 } });
  });

  it('takes ωexe from the H/D pair, from the overtone where ν̃0 of 2←0 is asked, else asks for none', () => {
    expect(starterSchemeFor('HCl and DCl')).toMatchObject({
      anharmonicityFrom: 'isotope-pair',
      forceConstantFrom: 'omegaE',
    });
    expect(starterSchemeFor('HCl fundamental and overtone').anharmonicityFrom).toBe('overtone');
    expect(starterSchemeFor('HCl fundamental')).toMatchObject({
      anharmonicityFrom: null,
      forceConstantFrom: 'nu0',
    });
  });

  it('merges repeated columns and keeps units and isotopologues', () => {
    const scheme = starterScheme(
      [
        { key: 'Be', unit: 'cm-1', isotopologue: 'H35Cl' },
        { key: 'Be', unit: 'cm-1', isotopologue: 'D35Cl' },
        { key: 're', unit: 'Å', isotopologue: null },
      ],
      ['H35Cl', 'D35Cl'],
    );
    expect(scheme.quantities.map((q) => [q.key, q.unit, q.isotopologues])).toEqual([
      ['Be', 'cm-1', ['H35Cl', 'D35Cl']],
      ['re', 'Å', undefined],
    ]);
  });

  it('refuses nothing to ask and nobody to ask about', () => {
    expect(() => starterScheme([], ['H35Cl'])).toThrow(RangeError);
    expect(() => starterScheme([{ key: 'Be', unit: null, isotopologue: null }], [])).toThrow(RangeError);
  });
});

describe('mistakeMargins', () => {
  it.each([
    ['HCl fundamental', 're', 0.73],
    ['HCl fundamental', 'Be', 1.44],
    ['CO fundamental', 're', 0.23],
    ['CO fundamental', 'Be', 0.45],
  ] as const)('%s: %s against its nearest mistake %f %% (worked out beforehand)', (variant, key, percent) => {
    const margin = mistakeMargins(starterSchemeFor(variant)).find((m) => m.quantity === key)!;
    expect(Math.abs(100 * margin.relative! - percent)).toBeLessThan(0.015);
    expect(margin.warnings).toEqual([]);
  });

  it('warns where a tolerance is edited beyond its margin', () => {
    const scheme = starterSchemeFor('HCl fundamental');
    const wide = {
      ...scheme,
      quantities: scheme.quantities.map((q) =>
        q.key === 're' ? { ...q, full: { relative: 0.005 }, part: { relative: 0.01 } } : q,
      ),
    };
    const { warnings } = mistakeMargins(wide).find((m) => m.quantity === 're')!;
    expect(warnings).toHaveLength(2);
    expect(warnings[0]).toContain('r0-as-re');
  });
});

describe('schemeOutlook', () => {
  it('warns where the choice of lines can carry a value to the nearest mistake, and not where the range is fixed', () => {
    const scheme: MarkingScheme = {
      ...starterSchemeFor('HCl fundamental'),
      methods: [{ fit: 'combination-differences', intercept: true, cubicTerm: false }],
    };
    const warned = schemeOutlook(scheme)
      .find((o) => o.quantity === 'Be')!
      .warnings.join(' ');
    expect(warned).toContain('choice of lines');
    const fixed = schemeOutlook({ ...scheme, lines: { rule: 'up-to', m: 7 } })
      .find((o) => o.quantity === 'Be')!
      .warnings.join(' ');
    expect(fixed).not.toContain('choice of lines');
  });

  it('tells the gap between the prescribed method and the full model', () => {
    const scheme: MarkingScheme = {
      ...starterSchemeFor('HCl fundamental'),
      methods: [{ fit: 'polynomial', degree: 2 }],
    };
    const be = schemeOutlook(scheme).find((o) => o.quantity === 'Be')!;
    expect(be.value! / be.best! - 1).toBeLessThan(-0.005);
    expect(be.warnings.join(' ')).toContain('full model');
  });

  it('says which quantity no accepted method yields', () => {
    const scheme: MarkingScheme = { ...starterSchemeFor('HCl fundamental'), methods: [{ fit: 'midpoint' }] };
    const be = schemeOutlook(scheme).find((o) => o.quantity === 'Be')!;
    expect(be).toMatchObject({ value: null });
    expect(be.warnings[0]).toContain('No accepted method');
  });

  it('an unlisted gas gets one warning and no numbers', () => {
    const all = schemeOutlook({ ...starterSchemeFor('HCl fundamental'), isotopologues: ['24Mg1H'] });
    expect(all.every((o) => o.value === null && o.warnings[0]!.includes('not listed'))).toBe(true);
  });
});
