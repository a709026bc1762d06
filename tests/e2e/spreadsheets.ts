import ExcelJS from 'exceljs';

/** A file as a browser hands it over. */
export interface Upload {
  readonly name: string;
  readonly mimeType: string;
  readonly buffer: Buffer;
}

const xlsxType = 'application/vnd.openxmlformats-officedocument.spreadsheetml.sheet';
export const xlsxUpload = (name: string, buffer: Buffer): Upload => ({ name, mimeType: xlsxType, buffer });
export const csvUpload = (name: string, rows: readonly (readonly (string | number)[])[]): Upload => ({
  name,
  mimeType: 'text/csv',
  buffer: Buffer.from(rows.map((row) => row.join(',')).join('\n'))
});

type Cell = string | number | null;

/** A workbook of one sheet. */
export async function workbook(sheet: string, rows: readonly (readonly Cell[])[]): Promise<Buffer> {
  const book = new ExcelJS.Workbook();
  book.addWorksheet(sheet).addRows(rows.map((row) => [...row]));
  return Buffer.from(await book.xlsx.writeBuffer());
}

/** One row of a data template, its cells by the heads of their columns. */
export interface TemplateRow {
  readonly number: number;
  text(head: string): string;
  set(head: string, value: string | number): void;
}

/**
 * Opens a data template as it was downloaded, lets `fill` write into each of its rows, and closes it again, everything else
 * untouched.
 */
export async function fillTemplate(file: string | Buffer, fill: (row: TemplateRow) => void): Promise<Buffer> {
  const book = new ExcelJS.Workbook();
  if (typeof file === 'string') await book.xlsx.readFile(file);
  else await book.xlsx.load(file as unknown as ExcelJS.Buffer);
  const sheet = book.getWorksheet('Results');
  if (!sheet) throw new Error('the template has no sheet Results');
  let heads: ReadonlyMap<string, number> | null = null;
  sheet.eachRow((row, number) => {
    if (!heads) {
      if (row.getCell(1).text !== 'Sample') return;
      const found = new Map<string, number>();
      row.eachCell((cell, column) => void found.set(cell.text, column));
      heads = found;
      return;
    }
    const columns = heads;
    const cell = (head: string) => {
      const column = columns.get(head);
      if (column === undefined) throw new Error(`the template has no column ${head}`);
      return row.getCell(column);
    };
    if (row.getCell(1).text === '') return;
    fill({
      number,
      text: (head) => cell(head).text,
      set: (head, value) => {
        cell(head).value = value;
      }
    });
  });
  return Buffer.from(await book.xlsx.writeBuffer());
}

/** The cells of one sheet of a downloaded workbook, as text. */
export async function sheetTexts(file: string, sheet: string): Promise<readonly (readonly string[])[]> {
  const book = new ExcelJS.Workbook();
  await book.xlsx.readFile(file);
  const found = book.getWorksheet(sheet);
  if (!found) throw new Error(`the workbook has no sheet ${sheet}`);
  const rows: string[][] = [];
  found.eachRow((row) => {
    const cells: string[] = [];
    for (let column = 1; column <= found.columnCount; column += 1) cells.push(row.getCell(column).text);
    rows.push(cells);
  });
  return rows;
}
