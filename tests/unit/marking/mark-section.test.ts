import { describe, expect, it } from 'vitest';
import { markSection } from '../../../shared-core/marking/mark-section.ts';
import { markingPreview } from '../../../shared-core/marking/marking-preview.ts';
import type { Submission } from '../../../shared-core/marking/types.ts';
import { heavyHydrogenChloride, referenceOf, schemeFor, submissionOf } from '../../helpers/marking-cases.ts';
import { hydrogenChloride } from '../../helpers/term-value-lines.ts';

const keys = ['nu0', 'B0', 'B1', 'Be', 'alphaE', 're', 'k'] as const;
const honest = {
  nu0: '2885.97',
  B0: '10.4400',
  B1: '10.1365',
  Be: '10.5917',
  alphaE: '0.30344',
  re: '127.465',
  k: '480.70',
};
const b0AsBe = { ...honest, Be: '10.4400', re: '128.388' };
/** The same gas on an axis scaled by some ppm, as another instrument would show it. */
const onAxis = (ppm: number) => {
  const f = 1 + ppm * 1e-6;
  const scaled = (b: typeof hydrogenChloride) => ({
    origin: b.origin * f,
    bLower: b.bLower * f,
    bUpper: b.bUpper * f,
    dLower: b.dLower * f,
    dUpper: b.dUpper * f,
  });
  return {
    ...referenceOf([
      { isotopologue: 'H35Cl', band: scaled(hydrogenChloride) },
      { isotopologue: 'H37Cl', band: scaled(heavyHydrogenChloride) },
    ]),
    axisScalePpm: ppm,
  };
};
const files = new Map([
  ['a.csv', onAxis(0)],
  ['b.csv', onAxis(0)],
  ['c.csv', onAxis(0)],
  ['d.csv', onAxis(400)],
]);
const student = (
  name: string,
  file: string,
  texts: Record<string, string>,
  more: Partial<Submission> = {},
): Submission => submissionOf(texts, { student: name, spectra: [file], ...more });
const codes = (submissions: Submission[]): string[] =>
  markSection(submissions, files, schemeFor(keys)).observations.map((o) => o.code);

describe('markSection', () => {
  it('marks each submission as it would be marked alone', () => {
    const section = markSection(
      [student('S1', 'a.csv', honest), student('S2', 'b.csv', b0AsBe)],
      files,
      schemeFor(keys),
    );
    expect(section.submissions.map((s) => s.points)).toEqual([7, 6]);
  });

  it('a slip that a third of the section shares points at the handout', () => {
    const many = ['a.csv', 'b.csv', 'c.csv'].map((f, i) => student(`S${i}`, f, b0AsBe));
    const section = markSection([...many, student('S8', 'a.csv', honest)], files, schemeFor(keys));
    const shared = section.observations.find((o) => o.code === 'shared-slip')!;
    expect(shared.students).toEqual(['S0', 'S1', 'S2']);
    expect(shared.text).toContain('handout');
    expect(codes([student('S1', 'a.csv', b0AsBe), student('S2', 'b.csv', honest)])).not.toContain(
      'shared-slip',
    );
  });

  it('an axis that is off is told once, with its scale', () => {
    const axis = markSection([student('S1', 'd.csv', honest)], files, schemeFor(keys)).observations.find(
      (o) => o.code === 'axis-scale',
    )!;
    expect(axis.files).toEqual(['d.csv']);
    expect(axis.figures['ppm']).toBe(400);
  });

  it('values that fit another submission’s file and not the own are an observation; partners share rightly', () => {
    const fromOther = {
      nu0: '2887.12',
      B0: '10.4442',
      B1: '10.1406',
      Be: '10.5959',
      alphaE: '0.30356',
      re: '127.440',
      k: '481.08',
    };
    const alone = markSection(
      [student('S1', 'a.csv', fromOther), student('S2', 'd.csv', honest)],
      files,
      schemeFor(keys),
    );
    const seen = alone.submissions[0]!.observations.find((o) => o.code === 'other-spectrum');
    expect(seen?.text).toContain('d.csv');
    expect(seen?.text).toContain('procedure');
    const partners = markSection(
      [student('S1', 'a.csv', fromOther, { group: 'G1' }), student('S2', 'd.csv', honest, { group: 'G1' })],
      files,
      schemeFor(keys),
    );
    expect(partners.submissions[0]!.observations.map((o) => o.code)).not.toContain('other-spectrum');
  });

  it('the same digits from different files are an observation, from one file or one group they are not', () => {
    expect(codes([student('S1', 'a.csv', honest), student('S2', 'b.csv', honest)])).toContain(
      'values-repeated',
    );
    expect(codes([student('S1', 'a.csv', honest), student('S2', 'a.csv', honest)])).not.toContain(
      'values-repeated',
    );
  });

  it('a repeated measurement is told unless its owners are partners', () => {
    const repeatedSpectra = [
      { files: ['a.csv', 'b.csv'] as [string, string], how: 'after scaling', figures: { correlation: 0.99 } },
    ];
    const apart = [student('S1', 'a.csv', honest), student('S2', 'b.csv', { ...honest, k: '480.7' })];
    expect(
      markSection(apart, files, schemeFor(keys), { repeatedSpectra }).observations.map((o) => o.code),
    ).toContain('spectrum-repeated');
    const together = apart.map((s) => ({ ...s, group: 'G' }));
    expect(
      markSection(together, files, schemeFor(keys), { repeatedSpectra }).observations.map((o) => o.code),
    ).not.toContain('spectrum-repeated');
  });

  it('handbook digits beside an own fit that gives something else are an observation, never a slip, and change no points', () => {
    const copied = student('S1', 'a.csv', { ...honest, alphaE: '0.307181' });
    const [marked] = markSection([copied], files, schemeFor(keys)).submissions;
    expect(marked!.observations.find((o) => o.code === 'value-from-literature')?.quantities).toEqual([
      'alphaE',
    ]);
    expect(marked!.slips).toEqual([]);
    expect(marked!.values.find((v) => v.quantity === 'alphaE')).toMatchObject({
      agreement: 'within',
      points: 1,
    });
  });
});

describe('markingPreview', () => {
  it('shows who would change, by how much and why', () => {
    const all = [student('S1', 'a.csv', honest), student('S2', 'b.csv', { ...honest, Be: '10.5300' })];
    const scheme = schemeFor(keys);
    const strict = {
      ...scheme,
      quantities: scheme.quantities.map((q) => (q.key === 'Be' ? { ...q, part: null } : q)),
    };
    const changes = markingPreview(
      markSection(all, files, scheme).submissions,
      markSection(all, files, strict).submissions,
    );
    expect(changes.map((c) => [c.student, c.pointsBefore, c.pointsAfter])).toEqual([['S2', 6.5, 6]]);
    expect(changes[0]!.changes[0]!.text).toContain('tolerance changed');
  });
});
