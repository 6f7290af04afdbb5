import { createHash } from 'node:crypto';
import { describe, expect, it } from 'vitest';
import { exampleSection } from '../../../electron/backend/example/section.ts';

const digest = (seed: number): string => {
  const hash = createHash('sha256');
  for (const file of exampleSection(seed).files) hash.update(file.name).update(file.bytes);
  return hash.digest('hex');
};

describe('invented section', () => {
  it('has the same bytes for the same seed and others for another', () => {
    expect(digest(3)).toBe(digest(3));
    expect(digest(3)).not.toBe(digest(4));
  });

  it('holds 24 submissions with pairs among them, a dozen slips and at least six styles of files', () => {
    const section = exampleSection(1);
    expect(section.truth).toHaveLength(24);
    expect(section.truth.filter((row) => row.slips.length > 0)).toHaveLength(12);
    expect(new Set(section.truth.flatMap((row) => row.slips)).size).toBe(12);
    const shared = section.truth.map((row) => row.spectrum);
    expect(shared.length - new Set(shared).size).toBe(6);
    const starts = section.files
      .filter((file) => file.name.startsWith('spectra/'))
      .map((file) => new TextDecoder('latin1').decode(file.bytes.slice(0, 400)).replaceAll(/[\d.+-]+/g, '0'));
    expect(new Set(starts).size).toBeGreaterThanOrEqual(6);
  });

  it('says in every row that its people are invented and names a file that is there', () => {
    const section = exampleSection(2);
    const table = new TextDecoder().decode(section.files[0]!.bytes).trim().split('\n');
    expect(table).toHaveLength(25);
    for (const row of table.slice(1)) {
      expect(row).toContain('Invented Student');
      expect(section.files.some((file) => file.name === `spectra/${row.split(',')[6]!}`)).toBe(true);
    }
  });
});
