import type ExcelJS from 'exceljs';

/** A cell of a report: text, an unrounded figure, or either with the address that opens it or a number format of its own. */
export type ReportCell =
  | string
  | number
  | null
  | { readonly value: string | number | null; readonly href: string | null; readonly format?: string };

export interface ReportColumn {
  readonly head: string;
  /** In characters. */
  readonly width: number;
  /** Number format of the spreadsheet; absent: text. */
  readonly format?: string;
}

/**
 * Writes one table as a sheet, row by row into the stream: what the file is about, the notes, the heads, the rows. The heads stay in
 * sight and repeat in print.
 */
export function writeSheet(
  book: ExcelJS.stream.xlsx.WorkbookWriter,
  name: string,
  about: readonly string[],
  columns: readonly ReportColumn[],
  rows: Iterable<readonly ReportCell[]>
): void {
  const headRow = about.length + 2;
  const sheet = book.addWorksheet(name.slice(0, 31), {
    views: [{ state: 'frozen', ySplit: headRow }],
    pageSetup: {
      orientation: 'landscape',
      fitToPage: true,
      fitToWidth: 1,
      fitToHeight: 0,
      printTitlesRow: `${headRow}:${headRow}`
    },
    headerFooter: { oddFooter: '&L&F&C&A&RPage &P of &N' }
  });
  sheet.columns = columns.map(({ width }) => ({ width }));
  about.forEach((line, index) => {
    const row = sheet.addRow([line]);
    row.font = index === 0 ? { bold: true, size: 13 } : { color: { argb: 'FF5A676D' } };
    row.commit();
  });
  sheet.addRow([]).commit();
  const heads = sheet.addRow(columns.map(({ head }) => head));
  heads.font = { bold: true };
  heads.alignment = { wrapText: true, vertical: 'bottom' };
  heads.border = { bottom: { style: 'thin' } };
  heads.commit();
  for (const cells of rows) writeRow(sheet, columns, cells);
  sheet.commit();
}

function writeRow(
  sheet: ExcelJS.Worksheet,
  columns: readonly ReportColumn[],
  cells: readonly ReportCell[]
): void {
  const row = sheet.addRow([]);
  row.alignment = { vertical: 'top', wrapText: true };
  cells.forEach((given, index) => {
    const cellGiven = typeof given === 'object' && given !== null ? given : { value: given, href: null };
    const { value, href } = cellGiven;
    if (value === null || value === '') return;
    const cell = row.getCell(index + 1);
    const format = cellGiven.format ?? columns[index]?.format;
    if (href !== null && typeof value === 'string') {
      cell.value = { text: value, hyperlink: href };
      cell.font = { color: { argb: 'FF0F6B74' } };
    } else {
      // A figure stays a figure; the name beside it carries the link.
      cell.value = value;
      if (typeof value === 'number' && format) cell.numFmt = format;
    }
  });
  row.commit();
}
