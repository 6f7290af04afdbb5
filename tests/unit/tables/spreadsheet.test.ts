import { strToU8, zipSync } from 'fflate';
import { describe, expect, it } from 'vitest';
import { readSpreadsheet } from '../../../electron/backend/read-spreadsheet.ts';
import { readSubmissions, readTable, understandTable } from '../../../shared-core/tables/index.ts';

/** A small workbook by the open format (ECMA-376): cells as texts or numbers, merged ranges. */
function workbook(
  sheets: Record<string, { rows: (string | number | null)[][]; merged?: string[] }>,
): Uint8Array {
  const head = '<?xml version="1.0" encoding="UTF-8" standalone="yes"?>';
  const main = 'http://schemas.openxmlformats.org/spreadsheetml/2006/main';
  const office = 'http://schemas.openxmlformats.org/officeDocument/2006/relationships';
  const packaged = 'http://schemas.openxmlformats.org/package/2006';
  const names = Object.keys(sheets);
  const cell = (value: string | number | null, row: number, column: number): string => {
    const ref = `${String.fromCharCode(65 + column)}${row + 1}`;
    if (value === null) return '';
    return typeof value === 'number'
      ? `<c r="${ref}"><v>${value}</v></c>`
      : `<c r="${ref}" t="inlineStr"><is><t>${value}</t></is></c>`;
  };
  const sheetXml = ({
    rows,
    merged = [],
  }: {
    rows: (string | number | null)[][];
    merged?: string[];
  }): string =>
    `${head}<worksheet xmlns="${main}"><sheetData>${rows.map((r, i) => `<row r="${i + 1}">${r.map((v, j) => cell(v, i, j)).join('')}</row>`).join('')}</sheetData>${merged.length > 0 ? `<mergeCells count="${merged.length}">${merged.map((m) => `<mergeCell ref="${m}"/>`).join('')}</mergeCells>` : ''}</worksheet>`;
  const files: Record<string, string> = {
    '[Content_Types].xml': `${head}<Types xmlns="${packaged}/content-types"><Default Extension="rels" ContentType="application/vnd.openxmlformats-package.relationships+xml"/><Default Extension="xml" ContentType="application/xml"/><Override PartName="/xl/workbook.xml" ContentType="application/vnd.openxmlformats-officedocument.spreadsheetml.sheet.main+xml"/></Types>`,
    '_rels/.rels': `${head}<Relationships xmlns="${packaged}/relationships"><Relationship Id="rId1" Type="${office}/officeDocument" Target="xl/workbook.xml"/></Relationships>`,
    'xl/workbook.xml': `${head}<workbook xmlns="${main}" xmlns:r="${office}"><sheets>${names.map((n, i) => `<sheet name="${n}" sheetId="${i + 1}" r:id="rId${i + 1}"/>`).join('')}</sheets></workbook>`,
    'xl/_rels/workbook.xml.rels': `${head}<Relationships xmlns="${packaged}/relationships">${names.map((_, i) => `<Relationship Id="rId${i + 1}" Type="${office}/worksheet" Target="worksheets/sheet${i + 1}.xml"/>`).join('')}</Relationships>`,
    ...Object.fromEntries(names.map((n, i) => [`xl/worksheets/sheet${i + 1}.xml`, sheetXml(sheets[n]!)])),
  };
  return zipSync(Object.fromEntries(Object.entries(files).map(([name, text]) => [name, strToU8(text)])));
}

describe('a spreadsheet', () => {
  it('has its sheets read, merged headings included; numbers stored as numbers have unknown figures', async () => {
    const bytes = workbook({
      notes: { rows: [['marking begins on Monday']] },
      values: {
        rows: [
          ['Student', 'H35Cl', null, 'D35Cl', null],
          [null, 'Be (cm-1)', 're (pm)', 'Be (cm-1)', 're (pm)'],
          ['S1', 10.59, '127.50', 5.4, 127.5],
          [4102, '10,59', 127, '5,40', 128],
        ],
        merged: ['A1:A2', 'B1:C1', 'D1:E1'],
      },
    });
    const read = await readTable(bytes, 'class.xlsx', readSpreadsheet);
    if (!read.ok) throw new Error(read.reason);
    expect(read.tables.map((t) => t.sheet)).toEqual(['notes', 'values']);
    expect(understandTable(read.tables[0]!).kind).toBe('unknown');
    const understood = understandTable(read.tables[1]!);
    expect(understood.columns.filter((c) => c.ambiguous)).toEqual([]);
    const { submissions } = readSubmissions(read.tables[1]!, understood);
    expect(submissions.map((s) => s.student)).toEqual(['S1', '4102']);
    expect(submissions[0]!.values.map((v) => [v.isotopologue, v.quantity, v.value, v.figures])).toEqual([
      ['H35Cl', 'Be', 10.59, null],
      ['H35Cl', 're', 127.5, 5],
      ['D35Cl', 'Be', 5.4, null],
      ['D35Cl', 're', 127.5, null],
    ]);
  });

  it('that is damaged, or that no reader is there for, is refused with a sentence', async () => {
    const bytes = workbook({ a: { rows: [['x']] } });
    const half = await readTable(bytes.subarray(0, 300), 'half.xlsx', readSpreadsheet);
    expect(half.ok ? '' : half.reason).toMatch(/half\.xlsx: the spreadsheet is damaged/);
    const none = await readTable(bytes, 'a.xlsx');
    expect(none.ok ? '' : none.reason).toMatch(/save it as CSV/);
  });
});
