import type { Carried, ColumnMap, MapColumn, Orientation, TableMap } from '../../schemas/column-map';
import { readableSheets } from './column-map';
import { namesOf } from './import-names';
import { columnsUnder, type RecogniseContext } from './recognise-table';
import { turnedSheet } from './turned-sheet';
import type { Expectation, Sheet, Workbook } from './types';

/** What a person changes about how a file is read. Rows and columns are zero-based and, of a turned sheet, turned. */
export type MapChange =
  | { readonly what: 'column'; readonly sheet: string; readonly column: MapColumnChange }
  | {
      readonly what: 'table';
      readonly sheet: string;
      readonly orientation: Orientation;
      /** The line that heads the columns; two lines where the one above belongs to it. */
      readonly headerLines: readonly number[];
      readonly blocks: TableMap['blocks'];
      readonly carried: readonly Carried[];
    }
  | { readonly what: 'sheet'; readonly sheet: string; readonly isRead: boolean }
  | {
      readonly what: 'labels';
      readonly samplePattern: string | null;
      readonly matching: ColumnMap['matching'];
      readonly fixed: ColumnMap['fixed'];
    };

export type MapColumnChange = Pick<MapColumn, 'column' | 'means' | 'analyte' | 'basis' | 'unit'>;

/**
 * The map as somebody changed it. A column of a table that has several sheets changes for all of them, since they are read alike;
 * another header line or orientation gives the columns anew, keeping what was chosen for headers of the same text.
 *
 * @throws RangeError for a sheet or a column that is not there
 */
export function changedMap(
  map: ColumnMap,
  change: MapChange,
  workbook: Workbook,
  expectation: Expectation
): ColumnMap {
  const context = namesOf(workbook, expectation);
  switch (change.what) {
    case 'labels': {
      const { samplePattern, matching, fixed } = change;
      return { ...map, samplePattern, isPatternConfirmed: true, matching, fixed };
    }
    case 'sheet':
      return change.isRead
        ? withSheet(map, change.sheet, workbook, context)
        : withoutSheet(map, change.sheet);
    case 'table': {
      const table = tableOf(map, change.sheet);
      const { orientation, headerLines, blocks, carried } = change;
      const next: TableMap = {
        ...table,
        orientation,
        headerLines: [...headerLines],
        blocks,
        carried: [...carried],
        columns: withKnown(
          columnsUnder(viewOf(sheetOf(workbook, change.sheet), orientation), headerLines, context),
          table.columns
        )
      };
      return replacing(map, table, next);
    }
    case 'column': {
      const table = tableOf(map, change.sheet);
      const { column, ...meaning } = change.column;
      const known = table.columns.some((each) => each.column === column);
      const columns = known
        ? table.columns.map((each) => (each.column === column ? { ...each, ...meaning } : each))
        : [...table.columns, { column, header: '', ...meaning }].sort(
            (one, other) => one.column - other.column
          );
      return replacing(map, table, { ...table, columns, orientation: orientationOf(table, columns) });
    }
  }
}

/** Columns that name an analyte each stand side by side; a column that names the row's analyte makes a row of each. */
function orientationOf({ orientation }: TableMap, columns: readonly MapColumn[]): Orientation {
  if (orientation === 'analytes down') return orientation;
  const isRead = ({ means }: MapColumn): boolean => means !== 'ignored' && means !== 'not understood';
  if (columns.some(({ means }) => means === 'analyte' || means === 'cas')) return 'long';
  return columns.some((column) => column.analyte !== null && isRead(column))
    ? 'analytes across'
    : orientation;
}

function sheetOf(workbook: Workbook, name: string): Sheet {
  const sheet = readableSheets(workbook).find((each) => each.name === name);
  if (!sheet) throw new RangeError(`There is no sheet ${name} that can be read.`);
  return sheet;
}

function tableOf(map: ColumnMap, sheet: string): TableMap {
  const table = map.tables.find(({ sheets }) => sheets.includes(sheet));
  if (!table) throw new RangeError(`Nothing of the sheet ${sheet} is read.`);
  return table;
}

const replacing = (map: ColumnMap, table: TableMap, next: TableMap): ColumnMap => ({
  ...map,
  tables: map.tables.map((each) => (each === table ? next : each))
});

function withoutSheet(map: ColumnMap, sheet: string): ColumnMap {
  return {
    ...map,
    tables: map.tables
      .map((table) => ({ ...table, sheets: table.sheets.filter((name) => name !== sheet) }))
      .filter(({ sheets }) => sheets.length > 0)
  };
}

/** A sheet of which nothing was recognised begins with its first filled line as the header and no meaning. */
function withSheet(map: ColumnMap, name: string, workbook: Workbook, context: RecogniseContext): ColumnMap {
  if (map.tables.some(({ sheets }) => sheets.includes(name))) return map;
  const sheet = sheetOf(workbook, name);
  const headerLines = [sheet.rowNumbers[0] ?? 0];
  const table: TableMap = {
    sheets: [name],
    orientation: 'long',
    headerLines,
    columns: columnsUnder(sheet, headerLines, context),
    carried: [],
    blocks: null,
    leftOut: [],
    fingerprint: `by hand ${name}`.slice(0, 64)
  };
  return { ...map, tables: [...map.tables, table] };
}

/** The sheet as its table is read, turned where the analytes stand below each other. */
function viewOf(sheet: Sheet, orientation: Orientation): Sheet {
  const view = orientation === 'analytes down' ? turnedSheet(sheet) : sheet;
  if (!view) throw new RangeError(`The sheet ${sheet.name} is too long to be read with the analytes down.`);
  return view;
}

/** What was chosen for a header stays with the same header. */
function withKnown(columns: readonly MapColumn[], before: readonly MapColumn[]): MapColumn[] {
  const used = new Set<MapColumn>();
  return columns.map((column) => {
    const known = before.find((each) => !used.has(each) && each.header === column.header);
    if (!known) return column;
    used.add(known);
    return { ...known, column: column.column };
  });
}
