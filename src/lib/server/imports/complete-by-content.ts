import { hasMeaning, isComplete, linesWithValue, namesAnalytes, rowsLookedAt } from './find-layout';
import type { Elsewhere, HeaderColumn, SheetLayout } from './find-layout';
import type { RecogniseContext } from './recognise-table';
import { cellAt } from './sheet';
import type { Sheet } from './types';

/** How far down the cells of a column are looked at to see what they name. */
const cellsLookedAt = 30;

function textsBelow(sheet: Sheet, row: number, column: number): readonly string[] {
  const texts: string[] = [];
  for (const each of sheet.rowNumbers) {
    if (each <= row) continue;
    const cell = cellAt(sheet, each, column);
    if (cell && cell.raw.trim() !== '') texts.push(cell.raw);
    if (texts.length >= cellsLookedAt) break;
  }
  return texts;
}

/**
 * A column without a header that is known, but with nothing in it that is not the name of a sample, is the sample's; likewise
 * the analyte's. A line that has a column of values is a header where that makes it one.
 */
export function completedByContent(
  sheet: Sheet,
  elsewhereAt: (row: number) => Elsewhere,
  context: RecogniseContext
): SheetLayout | null {
  for (const layout of linesWithValue(sheet, context.analytes)) {
    const [row = 0] = layout.headerLines;
    const elsewhere = elsewhereAt(row);
    let columns = layout.columns;
    for (const what of ['sample', 'analyte'] as const) {
      const has =
        hasMeaning(columns, what) ||
        (what === 'analyte' && (hasMeaning(columns, 'cas') || namesAnalytes(columns)));
      if (!has) columns = withNamingColumn(sheet, row, columns, what, context);
    }
    if (columns !== layout.columns && isComplete(columns, elsewhere)) return { ...layout, columns };
  }
  return null;
}

function withNamingColumn(
  sheet: Sheet,
  row: number,
  columns: readonly HeaderColumn[],
  what: 'sample' | 'analyte',
  { places, analytes }: RecogniseContext
): readonly HeaderColumn[] {
  const names = (text: string): boolean =>
    (what === 'sample' ? places.find(text, null) : analytes.match(text)).kind !== 'none';
  const headed = new Map(columns.map((column) => [column.column, column]));
  for (let column = 0; column < Math.min(sheet.columnCount, rowsLookedAt); column++) {
    if ((headed.get(column)?.header.meaning ?? 'unknown') !== 'unknown') continue;
    const texts = textsBelow(sheet, row, column);
    const text = headed.get(column)?.text ?? '';
    // A line that itself has such a name is one of results.
    if (texts.length === 0 || !texts.every(names) || names(text)) continue;
    const found: HeaderColumn = { column, text, header: { meaning: what, unit: null } };
    return [...columns.filter((each) => each.column !== column), found].sort(
      (one, other) => one.column - other.column
    );
  }
  return columns;
}
