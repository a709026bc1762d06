import type { NameMatcher } from './name-matcher';
import { mergeAwareReader } from './merged-cells';
import { readHeader } from './read-header';
import type { Header, StatedKind } from './read-header';
import { rowCells } from './sheet';
import type { Sheet } from './types';

export interface HeaderColumn {
  readonly column: number;
  readonly text: string;
  readonly header: Header;
}

/** A header line that was found in a sheet. */
export interface SheetLayout {
  readonly layout: 'long' | 'wide';
  /** Zero-based row of the header's last line; the data start below. */
  readonly headerRow: number;
  readonly columns: readonly HeaderColumn[];
  /** What the sheet's name or a title above the header says the numbers are. */
  readonly titleKind: { readonly kind: StatedKind; readonly unit: string | null } | null;
}

/** A sheet in which something of a header was seen, but not enough of it. */
export interface PartialLayout {
  readonly headerRow: number;
  readonly seen: readonly string[];
  readonly missing: readonly string[];
}

/** How far down a header is looked for: title blocks above tables are shorter. */
const rowsLookedAt = 60;

/**
 * Finds the header line of a sheet: the first that has a sample column and either an analyte column with a value column (long) or
 * columns headed by analytes (wide). The line above may carry the analytes' names, merged over their columns.
 *
 * @param analytes names of the panel → panel entry id
 * @returns the layout, what is missing of the likeliest header, or null where nothing looks like one
 */
export function findLayout(sheet: Sheet, analytes: NameMatcher<string>): SheetLayout | PartialLayout | null {
  const read = cachedHeaders(analytes);
  let best: { row: number; columns: readonly HeaderColumn[]; score: number } | null = null;
  for (const row of sheet.rowNumbers.subarray(0, rowsLookedAt)) {
    const columns = singleLine(sheet, row, read);
    if (isComplete(columns)) return withSecondLine(sheet, row, columns, read);
    const composed = twoLines(sheet, row, read);
    if (isComplete(composed)) return layoutOf(sheet, row, composed, read);
    const score = meaningsOf(columns).size;
    if (score >= 2 && score > (best?.score ?? 0)) best = { row, columns, score };
  }
  return best ? { headerRow: best.row, ...partsOf(best.columns) } : null;
}

export function isLayout(found: SheetLayout | PartialLayout): found is SheetLayout {
  return 'layout' in found;
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
  if (row === 0) return [];
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

function joined(column: number, upper: string, lower: string, read: ReadText): HeaderColumn {
  const below = read(lower);
  const above = upper === '' ? null : read(upper);
  const text = upper === '' ? lower : `${upper} ${lower}`;
  if (above?.meaning === 'value' && above.analyte !== null) {
    if (below.meaning === 'value' && below.analyte === null) {
      return { column, text, header: { ...below, unit: below.unit ?? above.unit, analyte: above.analyte } };
    }
    if (below.meaning === 'internal area' && below.analyte === null) {
      return { column, text, header: { ...below, analyte: above.analyte } };
    }
  }
  return { column, text: lower, header: below };
}

/** A complete line may be the upper one of two: "Caffeine" over "area" and "internal standard area". */
function withSecondLine(
  sheet: Sheet,
  row: number,
  columns: readonly HeaderColumn[],
  read: ReadText
): SheetLayout {
  const next = row + 1;
  const below = singleLine(sheet, next, read);
  const hasSubheads = below.some(
    ({ header }) =>
      (header.meaning === 'value' || header.meaning === 'internal area') && header.analyte === null
  );
  const composed = hasSubheads ? twoLines(sheet, next, read) : [];
  return isComplete(composed) ? layoutOf(sheet, next, composed, read) : layoutOf(sheet, row, columns, read);
}

function layoutOf(
  sheet: Sheet,
  headerRow: number,
  columns: readonly HeaderColumn[],
  read: ReadText
): SheetLayout {
  const meanings = meaningsOf(columns);
  return {
    layout: meanings.has('analyte') || meanings.has('cas') ? 'long' : 'wide',
    headerRow,
    columns,
    titleKind: titleKind(sheet, headerRow, read)
  };
}

function titleKind(sheet: Sheet, headerRow: number, read: ReadText): SheetLayout['titleKind'] {
  const titles = [...sheet.rowNumbers].filter((row) => row < headerRow).slice(0, rowsLookedAt);
  const texts = [
    ...titles.flatMap((row) =>
      rowCells(sheet, row).map(({ cell }) => (cell.kind === 'text' ? cell.value : ''))
    ),
    sheet.name
  ];
  for (const text of texts) {
    const header = text === '' || text.length > 300 ? null : read(text);
    if (header?.meaning === 'value' && header.analyte === null && header.kind !== 'result') {
      return { kind: header.kind, unit: header.unit };
    }
  }
  return null;
}

function meaningsOf(columns: readonly HeaderColumn[]): ReadonlySet<string> {
  return new Set(
    columns.flatMap(({ header }) => {
      if (header.meaning === 'unknown' || header.meaning === 'ignored') return [];
      return header.meaning === 'value' && header.analyte !== null ? ['analyte value'] : [header.meaning];
    })
  );
}

function isComplete(columns: readonly HeaderColumn[]): boolean {
  const meanings = meaningsOf(columns);
  if (!meanings.has('sample')) return false;
  return meanings.has('analyte') || meanings.has('cas')
    ? meanings.has('value')
    : meanings.has('analyte value');
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
