import type { TableMap } from '../../schemas/column-map';
import { nameKey } from '../../domain/name-key';
import type { NamedText } from './named-text';
import { parseValue } from './parse-value';
import { cellAt, rowCells } from './sheet';
import type { Sheet } from './types';

/** One table of a sheet: where its rows are, and the titles above it. */
export interface Section {
  /** Last line of its header. */
  readonly headerRow: number;
  /** Index into `rowNumbers` of the first row, and one past the last. */
  readonly from: number;
  readonly to: number;
  readonly titles: readonly NamedText[];
}

type Blocks = Pick<TableMap, 'headerLines' | 'columns' | 'blocks' | 'orientation'>;

/** A title has few cells; more are a row of something else. */
const cellsOfTitle = 4;

/** The tables of a sheet: one, or the blocks into which it is parted. */
export function sectionsOf(sheet: Sheet, table: Blocks): readonly Section[] {
  const first = table.headerLines[0] ?? 0;
  const last = table.headerLines.at(-1) ?? 0;
  const numbers = sheet.rowNumbers;
  const start = indexAfter(numbers, last);
  const whole: Section = {
    headerRow: last,
    from: start,
    to: numbers.length,
    titles: titlesAbove(sheet, indexAfter(numbers, first - 1), 0, table)
  };
  if (table.blocks === null) return [whole];
  return table.blocks === 'repeat their header'
    ? repeatedHeaders(sheet, table, whole)
    : sharedHeader(sheet, table, whole);
}

/** Index of the first filled row behind the given one. */
function indexAfter(numbers: Uint32Array, row: number): number {
  let low = 0;
  let high = numbers.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if ((numbers[middle] ?? 0) <= row) low = middle + 1;
    else high = middle;
  }
  return low;
}

function repeatedHeaders(sheet: Sheet, table: Blocks, whole: Section): readonly Section[] {
  const lines = table.headerLines.length;
  const headers = headerRepeats(sheet, whole.headerRow).filter((at) => at >= whole.from);
  const sections: Section[] = [];
  let { headerRow, from, titles } = whole;
  for (const at of headers) {
    const next = titlesAbove(sheet, at - (lines - 1), from, table);
    sections.push({ headerRow, from, to: at - (lines - 1) - rowsOf(next), titles });
    headerRow = sheet.rowNumbers[at] ?? 0;
    from = at + 1;
    titles = next;
  }
  return [...sections, { headerRow, from, to: whole.to, titles }];
}

function rowsOf(titles: readonly NamedText[]): number {
  return new Set(titles.map(({ row }) => row)).size;
}

/** Indexes of the rows that say the same as the header does. */
export function headerRepeats(sheet: Sheet, headerRow: number): readonly number[] {
  const wanted = rowCells(sheet, headerRow).flatMap(({ column, cell }) =>
    cell.kind === 'text' && cell.value.trim() !== '' ? [{ column, key: nameKey(cell.value) }] : []
  );
  const [first] = wanted;
  if (!first) return [];
  const found: number[] = [];
  sheet.rowNumbers.forEach((row, at) => {
    const says = ({ column, key }: { column: number; key: string }): boolean => {
      const cell = cellAt(sheet, row, column);
      return cell?.kind === 'text' && nameKey(cell.value) === key;
    };
    if (says(first) && wanted.every(says)) found.push(at);
  });
  return found;
}

/** A title stands alone in its row, after a blank one or right below the header, and the rows of its block follow. */
function sharedHeader(sheet: Sheet, table: Blocks, whole: Section): readonly Section[] {
  const sections: Section[] = [];
  let { from, titles } = whole;
  for (let at = whole.from; at < whole.to; at++) {
    if (!isBlockTitle(sheet, at, table, whole.headerRow)) continue;
    if (at > from) sections.push({ headerRow: whole.headerRow, from, to: at, titles });
    titles = titleTexts(sheet, sheet.rowNumbers[at] ?? 0);
    from = at + 1;
  }
  return [...sections, { headerRow: whole.headerRow, from, to: whole.to, titles }];
}

export function isBlockTitle(
  sheet: Sheet,
  at: number,
  table: Pick<Blocks, 'columns'>,
  headerRow: number
): boolean {
  const row = sheet.rowNumbers[at] ?? 0;
  const before = at === 0 ? -1 : (sheet.rowNumbers[at - 1] ?? 0);
  return (
    (before < row - 1 || before === headerRow) &&
    isTitle(sheet, row, table) &&
    rowCells(sheet, row).length <= 2
  );
}

/** Upwards from a header to the row that holds values, or to the table before. */
function titlesAbove(sheet: Sheet, end: number, start: number, table: Blocks): readonly NamedText[] {
  const titles: NamedText[][] = [];
  for (let at = end - 1; at >= start; at--) {
    const row = sheet.rowNumbers[at] ?? 0;
    if (!isTitle(sheet, row, table)) break;
    titles.unshift([...titleTexts(sheet, row)]);
  }
  return titles.flat();
}

/** What a title cell can say before the name that stands in the cell beside it. */
const titleLabel =
  /^(?:analyte|compound|substance|component|peak|parameter|fraction|sample|label|replicate)(?: name| id)?\s*[:=]?$/i;

/**
 * A row of few texts and without a value. A text that is no value may stand in a value column behind a label ("Analyte:", "Caffeine");
 * any other is taken for a value that somebody spoilt, which must not be passed over.
 */
function isTitle(sheet: Sheet, row: number, { columns }: Pick<Blocks, 'columns'>): boolean {
  const cells = rowCells(sheet, row);
  const [first] = cells;
  if (!first || first.cell.kind !== 'text' || cells.length > cellsOfTitle) return false;
  const values = columns.flatMap(({ means, column }) =>
    means === 'area' || means === 'amount' ? [column] : []
  );
  return cells.every(
    ({ column, cell }) =>
      !values.includes(column) ||
      (column !== first.column &&
        titleLabel.test(String(first.cell.value).trim()) &&
        parseValue(cell, null).state === 'unreadable') ||
      (column === first.column && parseValue(cell, null).state === 'unreadable')
  );
}

function titleTexts(sheet: Sheet, row: number): readonly NamedText[] {
  return rowCells(sheet, row).flatMap(({ column, cell }) =>
    cell.kind === 'text' && cell.value.trim() !== '' && cell.value.length <= 300
      ? [{ text: cell.value, row, column }]
      : []
  );
}
