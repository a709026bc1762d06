import { createHash } from 'node:crypto';
import { nameKey } from '../../domain/name-key';
import { carriedNames } from '../../schemas/column-map';
import type {
  Carried,
  CarriedName,
  ColumnMeaning,
  MapColumn,
  Orientation,
  TableMap
} from '../../schemas/column-map';
import {
  findLayout,
  hasMeaning,
  isComplete,
  isLayout,
  linesWithValue,
  namesAnalytes,
  rowsLookedAt,
  titlesOf
} from './find-layout';
import type { Elsewhere, HeaderColumn, PartialLayout, SheetLayout } from './find-layout';
import { mergeAwareReader } from './merged-cells';
import { nameIn } from './named-text';
import type { Names } from './named-text';
import { readHeader, wordHeader } from './read-header';
import type { Header, StatedKind } from './read-header';
import { headerRepeats, isBlockTitle, sectionsOf } from './sheet-sections';
import { cellAt, rowCells } from './sheet';
import { turnedSheet } from './turned-sheet';
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

const meaningOf = {
  sample: 'sample',
  experiment: 'experiment',
  fraction: 'fraction',
  analyte: 'analyte',
  cas: 'cas',
  'internal area': 'internal standard area',
  limit: 'limit',
  retentionTime: 'retention time',
  ionRatio: 'ion ratio',
  signalToNoise: 'signal to noise',
  manualIntegration: 'manual integration',
  manualCause: 'manual integration cause',
  finalVolume: 'final volume',
  dilution: 'dilution',
  aliquotShare: 'aliquot share',
  injection: 'injection',
  acquiredAt: 'acquired at',
  sampleVolume: 'sample volume',
  sampleMass: 'sample mass',
  ignored: 'ignored',
  unknown: 'not understood'
} as const satisfies Record<Exclude<Header['meaning'], 'value'>, ColumnMeaning>;

type Stated = Pick<SheetLayout, 'columns' | 'titleKind'>;

/** A bare "Result" takes what it is from a title, or is an area where the others are. */
function mapColumn(
  { column, text, header }: HeaderColumn,
  layout: Stated,
  context: RecogniseContext
): MapColumn {
  const analyte = 'analyte' in header && header.analyte !== null ? context.nameOf(header.analyte) : null;
  const base = {
    column,
    header: text.slice(0, 300),
    analyte,
    basis: null,
    unit: header.unit?.slice(0, 40) ?? null
  };
  if (header.meaning !== 'value') return { ...base, means: meaningOf[header.meaning] };
  const hasAreas = layout.columns.some(
    ({ header: other }) =>
      other.meaning === 'internal area' || (other.meaning === 'value' && other.kind === 'area')
  );
  const stated: { readonly kind: StatedKind; readonly unit: string | null } =
    header.kind === 'result' && header.unit === null
      ? (layout.titleKind ?? { kind: hasAreas ? 'area' : 'result', unit: null })
      : header;
  if (stated.kind === 'area') return { ...base, means: 'area', unit: null };
  return {
    ...base,
    means: 'amount',
    basis: stated.kind === 'concentration' || stated.kind === 'result' ? null : stated.kind,
    unit: (header.unit ?? stated.unit)?.slice(0, 40) ?? null
  };
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

/** By the headers and the orientation; the names of analytes do not count, nor how many there are side by side. */
export function fingerprintOf({
  orientation,
  columns,
  carried
}: Pick<SheetMap, 'orientation' | 'columns' | 'carried'>): string {
  const heads = columns.map(({ header, means, analyte }) =>
    analyte === null ? nameKey(header) || header.trim() : `* ${means}`
  );
  const distinct = heads.filter((head, index) => !head.startsWith('* ') || heads.indexOf(head) === index);
  const text = JSON.stringify([orientation, carried.map(({ names, from }) => [names, from]), distinct]);
  return createHash('sha256').update(text).digest('hex').slice(0, 32);
}

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
function completedByContent(
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

/** How many columns can stand before the samples in a sheet with the analytes down. */
const linesBefore = 12;

/** Analytes in rows, samples in columns: the sheet is looked at turned. */
function recogniseDown(sheet: Sheet, context: RecogniseContext): SheetMap | null {
  const turned = turnedSheet(sheet);
  if (!turned) return null;
  for (const line of turned.rowNumbers.subarray(0, linesBefore)) {
    const columns = rowCells(turned, line).flatMap(({ column, cell }): readonly HeaderColumn[] =>
      cell.kind === 'text' && cell.value.length <= 300
        ? [{ column, text: cell.value.trim(), header: readHeader(cell.value, context.analytes) }]
        : []
    );
    const firstAnalyte = columns.find(({ header }) => header.meaning === 'value' && header.analyte !== null);
    if (!firstAnalyte) continue;
    const table = tableDown(turned, line, columns, firstAnalyte.column, context);
    if (table) return table;
  }
  return null;
}

function tableDown(
  turned: Sheet,
  line: number,
  columns: readonly HeaderColumn[],
  firstAnalyte: number,
  context: RecogniseContext
): SheetMap | null {
  const lines = [...turned.rowNumbers].filter((each) => each > line);
  const textsOf = (column: number): readonly string[] =>
    lines.flatMap((each) => {
      const cell = cellAt(turned, each, column);
      return cell && cell.raw.trim() !== '' ? [cell.raw.trim()] : [];
    });
  const mostly = (column: number, names: (text: string) => boolean): boolean => {
    const texts = textsOf(column);
    return texts.length > 0 && texts.filter(names).length * 2 >= texts.length;
  };
  const found = new Map(columns.map((column) => [column.column, column]));
  const meanings = new Map<number, 'sample' | 'fraction'>();
  for (let column = 0; column < firstAnalyte; column++) {
    const meaning = found.get(column)?.header.meaning;
    const taken = [...meanings.values()];
    if (meaning === 'sample' || meaning === 'fraction') meanings.set(column, meaning);
    else if (!taken.includes('sample') && mostly(column, context.isSample)) meanings.set(column, 'sample');
    else if (!taken.includes('fraction') && mostly(column, (text) => context.places.hasFraction(text)))
      meanings.set(column, 'fraction');
  }
  const sampleLine = [...meanings].find(([, meaning]) => meaning === 'sample')?.[0];
  if (sampleLine === undefined) return null;

  const titleKind = kindAbove(columns, firstAnalyte, turned.name, context);
  const headed = [...new Set([...found.keys(), ...meanings.keys()])].sort((one, other) => one - other);
  const mapped = headed.map((column): MapColumn => {
    const head = found.get(column) ?? { column, text: '', header: { meaning: 'unknown', unit: null } };
    const meaning = meanings.get(column);
    const read = mapColumn(head, { columns, titleKind }, context);
    if (meaning) return { ...read, means: meaning, analyte: null, basis: null, unit: null };
    // Titles, and the corner of the table, are read by people.
    return column < firstAnalyte &&
      (read.means === 'area' || read.means === 'amount' || read.means === 'analyte')
      ? { ...read, means: 'ignored', basis: null, unit: null }
      : read;
  });
  // Columns that describe the analytes (CAS number, formula, unit) hold no sample.
  const labelled = mergeAwareReader(turned);
  const leftOut = lines.filter((each) => {
    const label = labelled(each, sampleLine)?.raw.trim() ?? '';
    if (label !== '') return !context.isSample(label) && isHeaderWord(label, context);
    return Array.from({ length: firstAnalyte }, (_, column) => cellAt(turned, each, column)?.raw ?? '').some(
      (text) => text !== '' && isHeaderWord(text, context)
    );
  });
  const base = { orientation: 'analytes down' as const, headerLines: [line], columns: mapped, leftOut };
  const needs = context.needsFraction && ![...meanings.values()].includes('fraction');
  const fraction = needs && nameIn(turned.name, 'fraction', context) !== null;
  const carried: Carried[] = fraction ? [{ names: 'fraction', from: 'sheet name' }] : [];
  return { ...base, blocks: null, carried, fingerprint: fingerprintOf({ ...base, carried }) };
}

function isHeaderWord(text: string, { analytes }: RecogniseContext): boolean {
  const header = readHeader(text, analytes);
  return header.meaning !== 'unknown' && !('analyte' in header && header.analyte !== null);
}

/** What a title, the corner of the table or the sheet's name says the numbers are. */
function kindAbove(
  columns: readonly HeaderColumn[],
  firstAnalyte: number,
  sheetName: string,
  { analytes }: RecogniseContext
): SheetLayout['titleKind'] {
  const above = columns
    .filter(({ column }) => column < firstAnalyte)
    .map(({ text, header }) => ({ text, header }));
  for (const { text, header } of [...above, { text: sheetName, header: readHeader(sheetName, analytes) }]) {
    if (header.meaning === 'value' && header.analyte === null && header.kind !== 'result')
      return { kind: header.kind, unit: header.unit };
    if (header.meaning === 'analyte' && header.unit !== null) {
      const unitAlone = readHeader(text.replace(/^[^([]*/, ''), analytes);
      if (unitAlone.meaning === 'value' && unitAlone.kind !== 'result')
        return { kind: unitAlone.kind, unit: unitAlone.unit };
    }
  }
  return null;
}
