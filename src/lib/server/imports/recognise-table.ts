import { carriedNames } from '../../schemas/column-map';
import type {
  Carried,
  CarriedName,
  ColumnMeaning,
  MapColumn,
  Orientation,
  TableMap
} from '../../schemas/column-map';
import { completedByContent } from './complete-by-content';
import { findLayout, hasMeaning, isLayout, namesAnalytes, titlesOf } from './find-layout';
import type { HeaderColumn, PartialLayout, SheetLayout } from './find-layout';
import { fingerprintOf, mapColumn } from './map-column';
import { nameIn } from './named-text';
import type { Names } from './named-text';
import { readHeader, wordHeader } from './read-header';
import { recogniseDown } from './recognise-down';
import { headerRepeats, isBlockTitle, sectionsOf } from './sheet-sections';
import { cellAt, rowCells } from './sheet';
import type { Sheet } from './types';

/** How one sheet is read; sheets that are read alike are put together later. */
export type SheetMap = Omit<TableMap, 'sheets'>;

export interface RecogniseContext extends Names {
  /** The name under which a panel entry is known on the panel. */
  readonly nameOf: (panelEntryId: string) => string;
  /** Whether any experiment has more than one fraction, so that rows have to say which. */
  readonly needsFraction: boolean;
}

/** @returns how the sheet is read, or what is missing of the likeliest header, or null where nothing looks like one */
export function recogniseTable(sheet: Sheet, context: RecogniseContext): SheetMap | PartialLayout | null {
  const plain = findLayout(sheet, context.analytes);
  if (plain && isLayout(plain)) return tableOf(sheet, plain, context);
  const elsewhere = elsewhereOf(sheet, context);
  const byContent = completedByContent(sheet, elsewhere, context);
  const carried = byContent ?? findLayout(sheet, context.analytes, elsewhere);
  const table = carried && isLayout(carried) ? tableOf(sheet, carried, context) : null;
  const whole = table && isWhole(table) ? table : null;
  // Several columns of one kind, or of one analyte each, may as well be samples side by side.
  if (whole && hasOneValue(whole)) return whole;
  return recogniseDown(sheet, context) ?? whole ?? plain ?? (carried && !isLayout(carried) ? carried : null);
}

function hasOneValue({ orientation, columns }: SheetMap): boolean {
  const values = columns.filter(({ means }) => means === 'area' || means === 'amount');
  return orientation === 'long' && values.length === 1;
}

export function isSheetMap(found: SheetMap | PartialLayout): found is SheetMap {
  return 'fingerprint' in found;
}

/** The table that a sheet would be if its name carried what its header lacks: for sheets beside others that are read so. */
export function recogniseLoosely(sheet: Sheet, context: RecogniseContext): SheetMap | null {
  const found = findLayout(sheet, context.analytes, () => ({ sample: true, analyte: true }));
  return found && isLayout(found) ? tableOf(sheet, found, context) : null;
}

function isWhole({ columns, carried, orientation }: SheetMap): boolean {
  const has = (means: ColumnMeaning): boolean => columns.some((column) => column.means === means);
  const isCarried = (names: CarriedName): boolean => carried.some((each) => each.names === names);
  return (
    (has('sample') || isCarried('sample')) &&
    (orientation !== 'long' || has('analyte') || has('cas') || isCarried('analyte'))
  );
}

/** For each of the upper rows: whether the sheet's name or a title above it names a sample, or an analyte. */
function elsewhereOf(
  sheet: Sheet,
  context: RecogniseContext
): (row: number) => { sample: boolean; analyte: boolean } {
  const first = { sample: Infinity, analyte: Infinity };
  for (const what of ['sample', 'analyte'] as const) {
    if (nameIn(sheet.name, what, context) !== null) first[what] = -1;
    else
      first[what] = titlesOf(sheet).find(({ text }) => nameIn(text, what, context) !== null)?.row ?? Infinity;
  }
  return (row) => ({ sample: first.sample < row, analyte: first.analyte < row });
}

function tableOf(sheet: Sheet, found: SheetLayout, context: RecogniseContext): SheetMap {
  const layout = isByRow(found) ? { ...found, columns: found.columns.map(byWords) } : found;
  const columns = layout.columns.map((column) => mapColumn(column, layout, context));
  const hasRowAnalyte = isByRow(layout);
  const orientation: Orientation =
    hasRowAnalyte || !namesAnalytes(layout.columns) ? 'long' : 'analytes across';
  const headerLines = [...layout.headerLines];
  const wanted = carriedNames.filter((what) => {
    if (what === 'sample') return !hasMeaning(layout.columns, 'sample');
    if (what === 'fraction') return context.needsFraction && !hasMeaning(layout.columns, 'fraction');
    return orientation === 'long' && !hasRowAnalyte;
  });
  const base = { orientation, headerLines, columns, leftOut: [] };
  const blocks = blocksOf(sheet, base, wanted, context);
  const carried = wanted.flatMap((what) => carriedFrom(sheet, { ...base, blocks }, what, context) ?? []);
  return { ...base, blocks, carried, fingerprint: fingerprintOf({ ...base, carried }) };
}

function isByRow({ columns }: SheetLayout): boolean {
  return hasMeaning(columns, 'analyte') || hasMeaning(columns, 'cas');
}

/** Where each row names its analyte, a header is not about one: "IS area" is that of the internal standard. */
function byWords(column: HeaderColumn): HeaderColumn {
  const isAbout = 'analyte' in column.header && column.header.analyte !== null;
  return { ...column, header: (isAbout ? wordHeader(column.text) : null) ?? column.header };
}

type Unblocked = Pick<SheetMap, 'orientation' | 'headerLines' | 'columns' | 'leftOut'>;

function blocksOf(
  sheet: Sheet,
  table: Unblocked,
  wanted: readonly CarriedName[],
  context: RecogniseContext
): SheetMap['blocks'] {
  const headerRow = table.headerLines.at(-1) ?? 0;
  if (headerRepeats(sheet, headerRow).some((at) => (sheet.rowNumbers[at] ?? 0) > headerRow))
    return 'repeat their header';
  if (wanted.length === 0) return null;
  for (let at = 0; at < sheet.rowNumbers.length; at++) {
    const row = sheet.rowNumbers[at] ?? 0;
    if (row <= headerRow || !isBlockTitle(sheet, at, table, headerRow)) continue;
    const texts = rowCells(sheet, row).map(({ cell }) => (cell.kind === 'text' ? cell.value : ''));
    if (wanted.some((what) => texts.some((text) => nameIn(text, what, context) !== null)))
      return 'share one header';
  }
  return null;
}

/** Where a name stands that the rows lack: in the titles of the blocks, in a cell above the header, in the sheet's name. */
function carriedFrom(
  sheet: Sheet,
  table: Unblocked & Pick<SheetMap, 'blocks'>,
  what: CarriedName,
  context: RecogniseContext
): Carried | null {
  const sections = sectionsOf(sheet, table);
  const named = sections.filter(({ titles }) =>
    titles.some(({ text }) => nameIn(text, what, context) !== null)
  );
  if (sections.length > 1 && named.length * 2 >= sections.length) return { names: what, from: 'block title' };
  const title = sections[0]?.titles.find(({ text }) => nameIn(text, what, context) !== null);
  if (title && title.row !== null && title.column !== null)
    return { names: what, from: 'title cell', row: title.row, column: title.column };
  return nameIn(sheet.name, what, context) === null ? null : { names: what, from: 'sheet name' };
}

/** What the columns mean by the texts that stand over them in the given lines, wherever a person says that the header is. */
export function columnsUnder(
  view: Sheet,
  headerLines: readonly number[],
  context: RecogniseContext
): MapColumn[] {
  const columns = Array.from({ length: view.columnCount }, (_, column): HeaderColumn => {
    const texts = headerLines.map((line) => cellAt(view, line, column)?.raw.trim() ?? '');
    const text = texts.filter((each) => each !== '').join(' ');
    return { column, text, header: readHeader(text, context.analytes) };
  }).filter(({ text }) => text !== '');
  return columns.map((column) => mapColumn(column, { columns, titleKind: null }, context));
}
