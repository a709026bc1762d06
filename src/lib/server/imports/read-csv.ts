import { CsvError, parse } from 'csv-parse/sync';
import { decodeText } from './decode-text';
import type { ReadingLimits } from './limits';
import { outOfProportion, Refusal } from './refusal';
import { SheetBuilder, TextStore } from './sheet-builder';
import type { Workbook } from './types';

const separators = ['\t', ';', ','] as const;
type Separator = (typeof separators)[number];

/**
 * Reads a text table (RFC 4180, with tab or semicolon as well). Every cell stays text: which mark parts the decimals is not
 * decided here.
 *
 * @throws Refusal
 */
export function readCsv(bytes: Buffer, limits: ReadingLimits): Workbook {
  const { text, encoding } = decodeText(bytes);
  const { separator, body, firstRow } = chooseSeparator(text);
  const builder = new SheetBuilder(new TextStore(limits), limits);
  let row = firstRow;
  try {
    parse(body, {
      delimiter: separator,
      record_delimiter: ['\r\n', '\n', '\r'],
      relax_column_count: true,
      relax_quotes: true,
      max_record_size: limits.textLength * 64,
      on_record: (record: readonly string[]) => {
        record.forEach((cell, column) => {
          if (cell.trim() !== '') builder.addText(row, column, 'text', cell);
        });
        row++;
        return null;
      }
    });
  } catch (error) {
    throw explain(error, row);
  }
  const sheet = builder.finish('Table', false);
  if (sheet.rowCount === 0)
    throw new Refusal('empty', 'This file has nothing but blank lines in it. Nothing was stored.');
  return { kind: 'csv', encoding, separator, sheets: [sheet] };
}

function explain(error: unknown, row: number): unknown {
  if (!(error instanceof CsvError)) return error;
  if (error.code === 'CSV_QUOTE_NOT_CLOSED') {
    return new Refusal(
      'damaged',
      `From row ${row + 1} on, a quotation mark is opened and never closed. Close it, or remove it, and bring the file again.`
    );
  }
  if (error.code === 'CSV_MAX_RECORD_SIZE') {
    return outOfProportion(`Row ${row + 1} of this file is longer than a row of measurements can be.`);
  }
  return new Refusal(
    'damaged',
    `Row ${row + 1} of this file does not follow the rules of a text table. Save it again.`
  );
}

/**
 * Takes the separator that parts most of the lines into the same number of cells; a first line "sep=;" decides.
 * Tab before semicolon before comma, since the later ones also occur inside numbers.
 */
function chooseSeparator(text: string): { separator: Separator; body: string; firstRow: number } {
  const declared = /^sep=([\t;,])(?:\r\n|\n|\r|$)/i.exec(text);
  if (declared)
    return { separator: declared[1] as Separator, body: text.slice(declared[0].length), firstRow: 1 };
  const lines = linesOutsideQuotes(text.slice(0, 64 * 1024)).slice(0, 200);
  let best: { separator: Separator; share: number } = { separator: ',', share: 0 };
  for (const separator of separators) {
    const counts = new Map<number, number>();
    for (const line of lines) {
      const parts = line.split(separator).length;
      if (parts > 1) counts.set(parts, (counts.get(parts) ?? 0) + 1);
    }
    const share = Math.max(0, ...counts.values()) / Math.max(1, lines.length);
    if (share > best.share + 1e-9) best = { separator, share };
  }
  return { separator: best.separator, body: text, firstRow: 0 };
}

/** The lines that hold something, without what stands between quotation marks. */
function linesOutsideQuotes(text: string): readonly string[] {
  return text
    .replace(/"(?:[^"]|"")*"/g, '')
    .split(/\r\n|\n|\r/)
    .filter((line) => line.trim() !== '');
}
