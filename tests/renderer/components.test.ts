// @vitest-environment happy-dom
import { mount } from '@vue/test-utils';
import { describe, expect, it } from 'vitest';
import MeasuredValue from '../../renderer/components/MeasuredValue.vue';
import StateBadge from '../../renderer/components/StateBadge.vue';
import { agreementLook, reliabilityLook } from '../../renderer/components/states.ts';
import { fill, isotopologueText, plural } from '../../renderer/text/index.ts';

describe('states', () => {
  it('are never shown by colour alone: each has a shape and a word', () => {
    const agreements = [
      'within',
      'part credit',
      'outside',
      'not given',
      'unreadable',
      'no reference',
    ] as const;
    const shapes = new Set(agreements.map((a) => agreementLook(a).shape));
    expect(shapes.size).toBe(agreements.length);
    for (const a of agreements) {
      const badge = mount(StateBadge, { props: { look: agreementLook(a) } });
      expect(badge.text()).toContain(a);
      expect(badge.find('svg').exists()).toBe(true);
    }
    expect(new Set((['sound', 'check', 'none'] as const).map((r) => reliabilityLook(r).shape)).size).toBe(3);
  });
});

describe('a measured value', () => {
  it('carries its unit and its uncertainty', () => {
    const shown = mount(MeasuredValue, {
      props: { value: 10.59237, uncertainty: 0.00021, unit: 'cm-1' },
    }).text();
    expect(shown).toContain('10.59237');
    expect(shown).toContain('0.00021');
    expect(shown).toContain('cm⁻¹');
  });
});

describe('texts', () => {
  it('fill their places, choose their number and raise mass numbers', () => {
    expect(fill('{n} of {all}', { n: 1, all: 2 })).toBe('1 of 2');
    expect(() => fill('{n}', {})).toThrow(/no value for "n"/);
    expect(plural(1, ['{n} file', '{n} files'])).toBe('1 file');
    expect(isotopologueText('H35Cl')).toBe('H³⁵Cl');
  });
});
