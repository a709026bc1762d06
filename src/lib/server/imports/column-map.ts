import { nameKey } from '../../domain/name-key';
import type { ColumnMap, MapColumn, TableMap } from '../../schemas/column-map';
import { namesOf } from './import-names';
import { suggestPattern } from './label-reader';
import { isSheetMap, recogniseLoosely, recogniseTable } from './recognise-table';
import type { RecogniseContext, SheetMap } from './recognise-table';
import { sectionsOf } from './sheet-sections';
import { cellAt, rowCells } from './sheet';
import { markSheet, readMeSheet } from './template-mark';
import { turnedSheet } from './turned-sheet';
import type { Expectation, Sheet, Workbook } from './types';

export type { ColumnMap, MapColumn, TableMap } from '../../schemas/column-map';

/** The sheets that can hold a table of results. */
export function readableSheets({ sheets }: Workbook): readonly Sheet[] {
  return sheets.filter(
    ({ name, hidden, rowCount }) => rowCount > 0 && !hidden && name !== markSheet && name !== readMeSheet
  );
}

/**
 * How we would read a file: which sheets hold a table, where its header is, what each column means, what sheets, titles and blocks
 * say for all their rows, and by which pattern its labels are taken apart. Nothing is reported here; reading by the map
 * (`readByColumnMap`) says what is in the way.
 *
 * Sheets that are read alike come as one table of several sheets. A file in which nothing is recognised gives a map without
 * tables.
 */
export function recogniseColumnMap(workbook: Workbook, expectation: Expectation): ColumnMap {
  const context = namesOf(workbook, expectation);
  const found = new Map<Sheet, SheetMap>();
  const open: Sheet[] = [];
  for (const sheet of readableSheets(workbook)) {
    const table = recogniseTable(sheet, context);
    if (table && isSheetMap(table)) found.set(sheet, table);
    else open.push(sheet);
  }
  // A sheet whose name is not understood, beside others of the same header whose names are, is one of them.
  const byHeader = new Map([...found.values()].map((table) => [headerKey(table), table]));
  for (const sheet of open) {
    const loose = recogniseLoosely(sheet, context);
    const family = loose && byHeader.get(headerKey(loose));
    if (family) found.set(sheet, family);
  }
  return withPattern(workbook, together(workbook, found), context);
}

const headerKey = ({ orientation, headerLines, columns }: SheetMap): string =>
  JSON.stringify([orientation, headerLines, columns]);

function together(workbook: Workbook, found: ReadonlyMap<Sheet, SheetMap>): readonly TableMap[] {
  const families = new Map<string, TableMap & { sheets: string[] }>();
  for (const sheet of workbook.sheets) {
    const table = found.get(sheet);
    if (!table) continue;
    const key = JSON.stringify(table);
    const family = families.get(key);
    if (family) family.sheets.push(sheet.name);
    else families.set(key, { ...table, sheets: [sheet.name] });
  }
  return [...families.values()];
}

function withPattern(
  workbook: Workbook,
  tables: readonly TableMap[],
  { places }: RecogniseContext
): ColumnMap {
  const has = (means: MapColumn['means'], names: 'fraction' | null): boolean =>
    tables.every(
      ({ columns, carried }) =>
        columns.some((column) => column.means === means) ||
        carried.some((each) => each.names === names && each.from !== 'block title')
    );
  return {
    version: 1,
    tables: [...tables],
    samplePattern: suggestPattern(labelsOf(workbook, tables), places, {
      hasFraction: has('fraction', 'fraction'),
      hasInjection: has('injection', null)
    }),
    isPatternConfirmed: false,
    matching: 'names',
    decimal: null,
    dateOrder: null,
    fixed: { experiment: null, fraction: null }
  };
}

/** The sample labels of a file in their order, each once. */
export function labelsOf(workbook: Workbook, tables: readonly TableMap[]): readonly string[] {
  const labels = new Set<string>();
  const tableOf = new Map(tables.flatMap((table) => table.sheets.map((name) => [name, table] as const)));
  for (const sheet of workbook.sheets) {
    const table = tableOf.get(sheet.name);
    if (!table) continue;
    if (table.carried.some(({ names, from }) => names === 'sample' && from === 'sheet name'))
      labels.add(sheet.name);
    const column = table.columns.find(({ means }) => means === 'sample')?.column;
    const view = table.orientation === 'analytes down' ? turnedSheet(sheet) : sheet;
    if (column === undefined || !view) continue;
    const leftOut = new Set(table.leftOut);
    for (const { from, to } of sectionsOf(view, table)) {
      for (let at = from; at < to; at++) {
        const row = view.rowNumbers[at] ?? 0;
        const label = leftOut.has(row) ? '' : (cellAt(view, row, column)?.raw.trim() ?? '');
        if (label !== '') labels.add(label);
      }
    }
  }
  return [...labels];
}

/**
 * A saved map applied to another file: what a person chose for each header, and the rules for labels, decimal marks and dates, put on what
 * the new file has. Tables are known again by their fingerprint, or by all their headers standing where they stood.
 *
 * @param recognised `recogniseColumnMap` of the same file
 * @returns null where no table of the saved map is in the file
 */
export function applySavedMap(saved: ColumnMap, workbook: Workbook, recognised: ColumnMap): ColumnMap | null {
  const sheets = new Map(readableSheets(workbook).map((sheet) => [sheet.name, sheet]));
  const placedOf = (name: string): TableMap | null => {
    const sheet = sheets.get(name);
    return sheet
      ? (saved.tables.map((table) => placedOn(sheet, table)).find((table) => table !== null) ?? null)
      : null;
  };
  let isKnown = false;
  const tables: TableMap[] = [];
  const placed = new Set<string>();
  const place = (name: string): boolean => {
    const table = placedOf(name);
    if (table) tables.push(table);
    if (table) placed.add(name);
    return table !== null;
  };
  for (const table of recognised.tables) {
    const same = saved.tables.find(({ fingerprint }) => fingerprint === table.fingerprint);
    const others = same ? table.sheets : table.sheets.filter((name) => !place(name));
    if (others.length > 0) tables.push(same ? withChoices(table, same) : { ...table, sheets: others });
    isKnown ||= same !== undefined;
  }
  const read = new Set(recognised.tables.flatMap((table) => table.sheets));
  for (const name of sheets.keys()) if (!read.has(name)) place(name);
  isKnown ||= placed.size > 0;
  if (!isKnown) return null;
  const { samplePattern, isPatternConfirmed, matching, decimal, dateOrder, fixed } = saved;
  return {
    version: 1,
    tables: inOrder(workbook, tables),
    samplePattern: samplePattern ?? recognised.samplePattern,
    isPatternConfirmed: samplePattern === null ? recognised.isPatternConfirmed : isPatternConfirmed,
    matching,
    decimal,
    dateOrder,
    fixed
  };
}

/** How far down the header of a saved map is looked for. */
const linesLookedAt = 200;

/** What was chosen for a header holds for the same header, the second of a name for the second. */
function withChoices(table: TableMap, saved: TableMap): TableMap {
  const chosen = new Map(numbered(saved.columns).map(({ key, column }) => [key, column]));
  return {
    ...table,
    blocks: saved.blocks,
    columns: numbered(table.columns).map(({ key, column }) => {
      const before = chosen.get(key);
      if (!before) return column;
      const { means, analyte, basis, unit } = before;
      return { ...column, means, analyte: column.analyte ?? analyte, basis, unit };
    })
  };
}

function numbered(
  columns: readonly MapColumn[]
): readonly { readonly key: string; readonly column: MapColumn }[] {
  const seen = new Map<string, number>();
  return columns.map((column) => {
    const head = nameKey(column.header) || `column ${column.column}`;
    const count = (seen.get(head) ?? 0) + 1;
    seen.set(head, count);
    return { key: `${head} ${count}`, column };
  });
}

/** The saved table where its headers, and no others, stand in the same columns, on whatever line. */
function placedOn(sheet: Sheet, saved: TableMap): TableMap | null {
  const view = saved.orientation === 'analytes down' ? turnedSheet(sheet) : sheet;
  const heads = saved.columns.filter(({ header }) => nameKey(header) !== '');
  if (!view || heads.length < 2) return null;
  const depth = saved.headerLines.length;
  const known = new Set(saved.columns.map(({ column }) => column));
  const row = view.rowNumbers.subarray(0, linesLookedAt).find(
    (each) =>
      rowCells(view, each).every(({ column, cell }) => cell.kind !== 'text' || known.has(column)) &&
      heads.every(({ column, header }) => {
        const lower = cellAt(view, each, column)?.raw.trim() ?? '';
        const upper = depth > 1 && each > 0 ? (cellAt(view, each - 1, column)?.raw.trim() ?? '') : '';
        return [lower, upper, `${upper} ${lower}`].some((text) => nameKey(text) === nameKey(header));
      })
  );
  if (row === undefined) return null;
  const headerLines = saved.headerLines.map((_, index) => row - (depth - 1) + index);
  return { ...saved, sheets: [sheet.name], headerLines, leftOut: [] };
}

function inOrder({ sheets }: Workbook, tables: readonly TableMap[]): TableMap[] {
  const rank = new Map(sheets.map(({ name }, index) => [name, index]));
  const first = ({ sheets: [name = ''] }: TableMap): number => rank.get(name) ?? 0;
  return [...tables].sort((one, other) => first(one) - first(other));
}
