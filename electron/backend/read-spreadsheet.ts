import readXlsxFile from 'read-excel-file/node';
import type { SpreadsheetReader } from '../../shared-core/tables/index.ts';

/** Sheets of an XLSX file; the reader of this runtime, handed to the tables. */
export const readSpreadsheet: SpreadsheetReader = async (bytes) => {
  const sheets = await readXlsxFile(Buffer.from(bytes));
  return sheets.map(({ sheet, data }) => ({ sheet, rows: data }));
};
