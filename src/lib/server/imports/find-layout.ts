import type { NameMatcher } from './name-matcher';
import { mergeAwareReader } from './merged-cells';
import { bareUnit, readHeader } from './read-header';
import type { Header, StatedKind } from './read-header';
import { rowCells } from './sheet';
import type { Sheet } from './types';

export interface HeaderColumn {
  readonly column: number;
  readonly text: string;
  readonly header: Header;
}

/** A header that was found in a sheet. */
export interface SheetLayout {
  /** Zero-based rows of its one or two lines; the data start below the last. */
  readonly headerLines: readonly number[];
  readonly columns: readonly HeaderColumn[];
  /** What the sheet's name or a title above the header says the numbers are. */
  readonly titleKind: { readonly kind: StatedKind; readonly unit: string | null } | null;
}

/** A sheet in which something of a header was seen, but not enough of it. */
export interface PartialLayout {
  readonly headerRow: number;
  readonly columns: readonly HeaderColumn[];
  readonly seen: readonly string[];
  readonly missing: readonly string[];
}

/** What a header may lack, since it stands elsewhere: in the sheet's name, or in a title. */
export interface Elsewhere {
  readonly sample: boolean;
  readonly analyte: boolean;
}

/** How far down a header is looked for: title blocks above tables are shorter. */
export const rowsLookedAt = 60;

const nothingElsewhere = (): Elsewhere => ({ sample: false, analyte: false });

/**
 * Finds the header of a sheet: the first line that has a sample column and either an analyte column with a value column or
 * columns headed by analytes. A second line may carry the analytes' names, merged over their columns, or the units.
 *
 * @param analytes names of the panel → panel entry id
 * @param elsewhereAt what need not be in a header on that row
 * @returns the layout, what is missing of the likeliest header, or null where nothing looks like one
 */
export function findLayout(
  sheet: Sheet,
  analytes: NameMatcher<string>,
  elsewhereAt: (row: number) => Elsewhere = nothingElsewhere
): SheetLayout | PartialLayout | null {
  const read = cachedHeaders(analytes);
  let best: { row: number; columns: readonly HeaderColumn[]; score: number } | null = null;
  for (const row of sheet.rowNumbers.subarray(0, rowsLookedAt)) {
    const columns = singleLine(sheet, row, read);
    const elsewhere = hasNumbers(sheet, row) ? nothingElsewhere() : elsewhereAt(row);
    if (isComplete(columns, elsewhere)) return withSecondLine(sheet, row, columns, read, elsewhere);
    const composed = twoLines(sheet, row, read);
    if (isComplete(composed, elsewhere)) return layoutOf(sheet, [row - 1, row], composed, read);
    const score = meaningsOf(columns).size;
    if (score >= 2 && score > (best?.score ?? 0)) best = { row, columns, score };
  }
  return best ? { headerRow: best.row, columns: best.columns, ...partsOf(best.columns) } : null;
}

export function isLayout(found: SheetLayout | PartialLayout): found is SheetLayout {
  return 'headerLines' in found;
}

/** The upper lines with a column of values, whether or not they make a header by themselves. */
export function linesWithValue(sheet: Sheet, analytes: NameMatcher<string>): readonly SheetLayout[] {
  const read = cachedHeaders(analytes);
  return [...sheet.rowNumbers.subarray(0, rowsLookedAt)].flatMap((row) => {
    const columns = hasNumbers(sheet, row) ? [] : singleLine(sheet, row, read);
    return columns.length > 1 && hasMeaning(columns, 'value') ? [layoutOf(sheet, [row], columns, read)] : [];
  });
}

type ReadText = (text: string) => Header;

function cachedHeaders(analytes: NameMatcher<string>): ReadText {
  const known = new Map<string, Header>();
  return (text) => {
    const found = known.get(text) ?? readHeader(text, analytes);
    known.set(text, found);
    return found;
  };
}

function singleLine(sheet: Sheet, row: number, read: ReadText): readonly HeaderColumn[] {
  return rowCells(sheet, row).flatMap(({ column, cell }) =>
    cell.kind === 'text' && cell.value.length <= 300 && cell.value.trim() !== ''
      ? [{ column, text: cell.value.trim(), header: read(cell.value) }]
      : []
  );
}

/** Reads a row together with the one above it, from which columns take the analyte, or their whole header. */
function twoLines(sheet: Sheet, row: number, read: ReadText): readonly HeaderColumn[] {
  // A line with numbers is one of results, and what is above it the header.
  if (row === 0 || hasNumbers(sheet, row)) return [];
  const cellText = mergeAwareReader(sheet);
  const textAt = (at: number, column: number): string => {
    const cell = cellText(at, column);
    return cell?.kind === 'text' && cell.value.length <= 300 ? cell.value.trim() : '';
  };
  const columns: HeaderColumn[] = [];
  for (let column = 0; column < sheet.columnCount; column++) {
    const lower = textAt(row, column);
    const upper = textAt(row - 1, column);
    if (lower === '' && upper === '') continue;
    if (lower === '' || lower === upper) columns.push({ column, text: upper, header: read(upper) });
    else columns.push(joined(column, upper, lower, read));
  }
  return columns;
}

function hasNumbers(sheet: Sheet, row: number): boolean {
  return rowCells(sheet, row).some(({ cell }) => cell.kind === 'number' || cell.kind === 'date');
}

function joined(column: number, upper: string, lower: string, read: ReadText): HeaderColumn {
  const unit = upper === '' ? null : bareUnit(lower);
  const text = upper === '' ? lower : unit === null ? `${upper} ${lower}` : `${upper} (${unit})`;
  if (unit !== null) return { column, text, header: read(text) };
  const below = read(lower);
  const above = upper === '' ? null : read(upper);
  if (above?.meaning === 'value' && above.analyte !== null && isSubhead(below)) {
    const header: Header =
      below.meaning === 'value'
        ? { ...below, unit: below.unit ?? above.unit, analyte: above.analyte }
        : { ...below, analyte: above.analyte };
    return { column, text, header };
  }
  return { column, text: lower, header: below };
}

type Subhead = Extract<Header, { readonly analyte: string | null }>;

/** What can stand under the name of an analyte. */
function isSubhead(header: Header): header is Subhead {
  return 'analyte' in header && header.analyte === null;
}

/** A complete line may be the upper one of two: "Caffeine" over "area" and "internal standard area", or over units. */
function withSecondLine(
  sheet: Sheet,
  row: number,
  columns: readonly HeaderColumn[],
  read: ReadText,
  elsewhere: Elsewhere
): SheetLayout {
  const below = singleLine(sheet, row + 1, read);
  const hasSubheads =
    below.some(({ header }) => isSubhead(header)) || below.some(({ text }) => bareUnit(text) !== null);
  const composed = hasSubheads ? twoLines(sheet, row + 1, read) : [];
  return isComplete(composed, elsewhere)
    ? layoutOf(sheet, [row, row + 1], composed, read)
    : layoutOf(sheet, [row], columns, read);
}

function layoutOf(
  sheet: Sheet,
  headerLines: readonly number[],
  columns: readonly HeaderColumn[],
  read: ReadText
): SheetLayout {
  return { headerLines, columns, titleKind: titleKind(sheet, headerLines[0] ?? 0, read) };
}

function titleKind(sheet: Sheet, headerRow: number, read: ReadText): SheetLayout['titleKind'] {
  const titles = [...sheet.rowNumbers.subarray(0, rowsLookedAt)].filter((row) => row < headerRow);
  const texts = [
    ...titles.flatMap((row) =>
      rowCells(sheet, row).map(({ cell }) => (cell.kind === 'text' ? cell.value : ''))
    ),
    sheet.name
  ];
  for (const text of texts) {
    const header = text === '' || text.length > 300 ? null : read(text);
    if (header?.meaning === 'value' && header.kind !== 'result') {
      return { kind: header.kind, unit: header.unit };
    }
  }
  return null;
}

export function hasMeaning(columns: readonly HeaderColumn[], meaning: Header['meaning']): boolean {
  return columns.some(({ header }) => header.meaning === meaning);
}

export function namesAnalytes(columns: readonly HeaderColumn[]): boolean {
  return columns.some(({ header }) => header.meaning === 'value' && header.analyte !== null);
}

/** All texts of the upper lines of a sheet, to be looked through for names. */
export function titlesOf(sheet: Sheet): readonly { row: number; column: number; text: string }[] {
  return [...sheet.rowNumbers.subarray(0, rowsLookedAt)].flatMap((row) =>
    rowCells(sheet, row).flatMap(({ column, cell }) =>
      cell.kind === 'text' && cell.value.trim() !== '' && cell.value.length <= 300
        ? [{ row, column, text: cell.value }]
        : []
    )
  );
}

function meaningsOf(columns: readonly HeaderColumn[]): ReadonlySet<string> {
  return new Set(
    columns.flatMap(({ header }) => {
      if (header.meaning === 'unknown' || header.meaning === 'ignored') return [];
      return header.meaning === 'value' && header.analyte !== null ? ['analyte value'] : [header.meaning];
    })
  );
}

/** Besides the sample and the analyte, which can stand elsewhere, only a value makes a table. */
export function isComplete(columns: readonly HeaderColumn[], elsewhere: Elsewhere): boolean {
  const meanings = meaningsOf(columns);
  if (!meanings.has('sample') && !elsewhere.sample) return false;
  // A title that is the name of an analyte is no header.
  if (columns.length < 2) return false;
  if (meanings.has('analyte') || meanings.has('cas')) return meanings.has('value');
  return meanings.has('analyte value') || (elsewhere.analyte && meanings.has('value'));
}

function partsOf(columns: readonly HeaderColumn[]): { seen: readonly string[]; missing: readonly string[] } {
  const meanings = meaningsOf(columns);
  const missing: string[] = [];
  if (!meanings.has('sample')) missing.push('a column with the sample');
  if (meanings.has('analyte') || meanings.has('cas')) {
    if (!meanings.has('value')) missing.push('a column with the area or the amount');
  } else if (!meanings.has('analyte value')) {
    missing.push('a column with the analyte, or a column for each analyte of the panel');
  }
  return {
    seen: columns.filter(({ header }) => header.meaning !== 'unknown').map(({ text }) => text),
    missing
  };
}
