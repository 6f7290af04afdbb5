import { parse } from 'csv-parse/sync';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  fillColumn,
  gradesTable,
  readSubmissions,
  readTextTable,
  understandTable,
  writeGrades,
  type RawTable,
} from '../../shared-core/tables/index.ts';
import { markedRow, twoValues } from '../helpers/grades-rows.ts';

function tableOf(text: string): RawTable {
  const read = readTextTable(text, 'table.csv');
  if (!read.ok) throw new Error(read.reason);
  return read.tables[0]!;
}
const awkward = fc.string({
  unit: fc.constantFrom('a', 'é', '"', ',', ';', '\r', '\n', '\t', ' ', '=', '+', '-', '@', '1', '.'),
  maxLength: 10,
});

describe('tables', () => {
  it('are understood the same in any order of their columns', () => {
    const columns = [
      ['student', 'S1', 'S2'], ['Be (cm-1)', '10.59', '10.4'], ['u(Be)', '0.02', '0.03'], ['re / Å', '1.275', '1.28'], ['k (N/m)', '480', '4.9e2'],
      ['alpha_e', '0.304', '0.31'], ['spectrum', 'a.jdx', 'b.jdx'], ['Be D35Cl (cm-1)', '5.44', '5.5'], ['name', 'Ida', 'Tom'], ['literature Be', '10.59', '10.59'],
    ]; // prettier-ignore
    const read = (order: string[][]): unknown => {
      const table = tableOf([0, 1, 2].map((row) => order.map((c) => c[row]).join(',')).join('\n'));
      const { submissions, problems } = readSubmissions(table, understandTable(table));
      const sorted = submissions.map((s) => ({
        ...s,
        values: s.values.toSorted((a, b) =>
          `${a.isotopologue}${a.quantity}`.localeCompare(`${b.isotopologue}${b.quantity}`),
        ),
      }));
      return { sorted, problems };
    };
    const expected = read(columns);
    fc.assert(
      fc.property(fc.shuffledSubarray(columns, { minLength: columns.length }), (order) => {
        expect(read(order)).toEqual(expected);
      }),
    );
  });

  it('of any text never end in an error or in a number that is not finite', () => {
    const headers = fc.constantFrom(
      'student',
      'Be (cm-1)',
      're',
      'k / N m-1',
      'u(Be)',
      '',
      'B',
      'HCl',
      'cm-1',
      '±',
      'value',
      'quantity',
      'm',
      'J',
    );
    const cell = fc.oneof(awkward, headers, fc.constantFrom('10,59', '1.275', '1e-10', '−3', 'n/a', '#REF!'));
    fc.assert(
      fc.property(
        fc.array(fc.array(cell, { maxLength: 6 }), { maxLength: 8 }),
        fc.constantFrom(',', ';', '\t'),
        (rows, separator) => {
          const read = readTextTable(rows.map((r) => r.join(separator)).join('\n'), 'x.csv');
          if (!read.ok) return;
          const { submissions } = readSubmissions(read.tables[0]!, understandTable(read.tables[0]!));
          for (const v of submissions.flatMap((s) => s.values))
            for (const n of [v.value, v.uncertainty, v.halfLastDigit])
              expect(n === null || Number.isFinite(n)).toBe(true);
        },
      ),
      { numRuns: 500 },
    );
  });
});

describe('the grades file', () => {
  it('comes back cell by cell from an RFC 4180 reader, and no text cell begins like a formula', () => {
    const points = fc.constantFrom(null, 0, 0.5, 1);
    const row = fc.record({ student: awkward, name: awkward, be: points, re: points, comment: awkward });
    fc.assert(
      fc.property(fc.array(row, { maxLength: 5 }), fc.constantFrom(',', ';', '\t'), (rows, separator) => {
        const cases = rows.map((r) => ({
          ...markedRow({ student: r.student, name: r.name, points: [['H35Cl', 'Be', r.be], ['H35Cl', 're', r.re]] }),
          comment: r.comment,
        })); // prettier-ignore
        const options = { separator } as const;
        const back: string[][] = parse(writeGrades(cases, twoValues(), options), {
          delimiter: separator,
          record_delimiter: '\r\n',
        });
        expect(back).toEqual(gradesTable(cases, twoValues(), options));
        expect(back.flat().filter((c) => /^[=+\-@\t\r]/.test(c))).toEqual([]);
      }),
      { numRuns: 300 },
    );
  });
});

describe('filling a column', () => {
  it('changes the cells of that column alone', () => {
    const cell = fc.string({ unit: fc.constantFrom('a', '"', ',', '\n', ' ', '7', 'é'), maxLength: 6 });
    const quote = (c: string): string => (/[",\n]/.test(c) ? `"${c.replaceAll('"', '""')}"` : c);
    fc.assert(
      fc.property(
        fc.array(fc.tuple(cell, cell, cell), { maxLength: 6 }),
        fc.constantFrom('\n', '\r\n'),
        (rows, end) => {
          const before = [['key', 'x', 'target', 'y'], ...rows.map(([x, t, y], i) => [`K${i}`, x, t, y])];
          const write = (table: string[][]): string => table.map((r) => r.map(quote).join(',')).join(end);
          const values = new Map(
            rows.flatMap((_, i): [string, string][] => (i % 2 === 0 ? [[`K${i}`, String(i / 4)]] : [])),
          );
          const filled = fillColumn(new TextEncoder().encode(write(before)), {
            keyColumn: 'key',
            targetColumn: 'target',
            values,
            separator: ',',
          });
          const after = before.map((r) =>
            r.map((c, column) => (column === 2 ? (values.get(r[0]!) ?? c) : c)),
          );
          expect(filled.ok && new TextDecoder().decode(filled.bytes)).toBe(write(after));
        },
      ),
      { numRuns: 300 },
    );
  });
});
