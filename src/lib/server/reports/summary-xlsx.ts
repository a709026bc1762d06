import { PassThrough, type Readable } from 'node:stream';
import ExcelJS from 'exceljs';
import { demoLabel } from '../../domain/cautions';
import type { SummaryView } from '../../views/summary';
import { writeSheet } from './sheet-writer';
import { summarySheets } from './summary-sheets';

/**
 * The validation summary as a workbook, written into the returned stream while it is read. Figures stand unrounded; names lead to
 * the page that opens them.
 *
 * @param origin of this installation, for the links
 * @param made who made the file and when, for its first lines
 */
export function summaryWorkbook(
  view: SummaryView,
  origin: string,
  made: { readonly by: string; readonly at: Date }
): Readable {
  const stream = new PassThrough();
  const book = new ExcelJS.stream.xlsx.WorkbookWriter({ stream, useStyles: true, useSharedStrings: false });
  book.title = `${view.study.code}, ${view.study.title}`;
  book.creator = made.by;
  book.created = made.at;
  const { study } = view;
  const about = [
    `${study.code}, ${study.title}, revision ${study.revision}, ${study.state}`,
    ...(view.lab.isDemo ? [demoLabel] : []),
    `${view.lab.name}. Summary ${view.hash}, made by ${made.by}, ${made.at.toISOString().slice(0, 16).replace('T', ' ')} UTC`
  ];
  const write = async (): Promise<void> => {
    for (const sheet of summarySheets(view, origin)) {
      writeSheet(book, sheet.name, [...about, sheet.note], sheet.columns, sheet.rows);
      // Lets the reader of the stream keep up, and other requests be answered.
      await new Promise<void>((resolve) => setImmediate(resolve));
    }
    await book.commit();
  };
  write().catch((error: unknown) =>
    stream.destroy(error instanceof Error ? error : new Error(String(error)))
  );
  return stream;
}
