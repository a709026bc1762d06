import type { CarriedName, ColumnMap, TableMap } from '../../schemas/column-map';
import { readableSheets } from './column-map';
import { planColumns } from './column-plan';
import type { ColumnPlan } from './column-plan';
import type { DecimalEvidence } from './decimal-evidence';
import { evidenceOf } from './decimal-marks';
import type { ProblemList, Problems } from './problems';
import type { RecogniseContext } from './recognise-table';
import { noteHidden, reportNothing, reportUnread } from './report-unread';
import { sectionsOf } from './sheet-sections';
import type { Section } from './sheet-sections';
import { readTemplateMark } from './template-mark';
import { turnedSheet } from './turned-sheet';
import type { Expectation, Sheet, Workbook } from './types';

export interface PlannedTable {
  readonly table: TableMap;
  /** Turned where the analytes stand below each other. */
  readonly view: Sheet;
  readonly sections: readonly Section[];
  readonly headerRow: number;
  readonly plan: ColumnPlan;
  readonly evidence: ReadonlyMap<number, DecimalEvidence>;
  readonly problems: Problems;
}

export function planTables(
  workbook: Workbook,
  map: ColumnMap,
  names: RecogniseContext,
  expectation: Expectation,
  problems: ProblemList
): readonly PlannedTable[] {
  const tableOf = new Map(map.tables.flatMap((table) => table.sheets.map((name) => [name, table] as const)));
  const planned: PlannedTable[] = [];
  const unread: Sheet[] = [];
  const readable = new Set(readableSheets(workbook));
  for (const sheet of workbook.sheets) {
    const table = tableOf.get(sheet.name);
    if (!readable.has(sheet)) {
      if (sheet.hidden && sheet.rowCount > 0 && readTemplateMark({ ...workbook, sheets: [sheet] }) === null)
        noteHidden(sheet, problems);
    } else if (table) {
      const plan = planTable(sheet, table, names, expectation, problems);
      if (plan) planned.push(plan);
    } else unread.push(sheet);
  }
  // A sheet beside the table (a cover, a method) may go unread; a file without any table may not.
  const severity =
    planned.length === 0 && !problems.all().some(({ severity }) => severity !== 'note') ? 'error' : 'note';
  for (const sheet of unread) reportUnread(sheet, names.analytes, severity, problems);
  if (planned.length === 0 && unread.length === 0 && severity === 'error') reportNothing(problems);
  return planned;
}

function planTable(
  sheet: Sheet,
  table: TableMap,
  names: RecogniseContext,
  expectation: Expectation,
  list: ProblemList
): PlannedTable | null {
  const isTurned = table.orientation === 'analytes down';
  const problems = isTurned ? list.turned() : list;
  const view = isTurned ? turnedSheet(sheet) : sheet;
  const headerRow = table.headerLines.at(-1) ?? 0;
  if (!view) {
    problems.error({
      code: 'nothing recognised',
      sheet: sheet.name,
      found: `${sheet.rowCount} rows`,
      expected: 'at most 65,535 rows where the analytes stand below each other',
      what: 'This sheet is too long to have its analytes below each other.',
      fix: 'Choose the orientation that it has.'
    });
    return null;
  }
  if (!hasItsParts(sheet, table, headerRow, problems)) return null;
  const { orientation } = table;
  const { analytes } = names;
  const { declared } = expectation;
  const plan = planColumns(table.columns, {
    sheet: sheet.name,
    orientation,
    headerRow,
    analytes,
    declared,
    problems
  });
  if (!plan) return null;
  const sections = sectionsOf(view, table);
  return { table, view, sections, headerRow, plan, evidence: evidenceOf(view, headerRow, plan), problems };
}

/** A map that was changed by a person may lack what a table needs. */
function hasItsParts(sheet: Sheet, table: TableMap, headerRow: number, problems: Problems): boolean {
  const { columns, carried, orientation } = table;
  const means = new Set(columns.map((column) => column.means));
  const isCarried = (name: CarriedName): boolean => carried.some(({ names }) => names === name);
  const missing: string[] = [];
  if (!means.has('sample') && !isCarried('sample')) missing.push('the sample');
  if (orientation === 'long' && !means.has('analyte') && !means.has('cas') && !isCarried('analyte'))
    missing.push('the analyte');
  if (!means.has('area') && !means.has('amount')) missing.push('an area or an amount');
  if (missing.length === 0) return true;
  problems.error({
    code: 'missing part of the map',
    sheet: sheet.name,
    row: headerRow,
    column: 0,
    found: 'a column map without it',
    expected: missing.join(' and '),
    what: `The column map of this sheet does not say where ${missing.join(' and ')} ${missing.length === 1 ? 'stands' : 'stand'}.`,
    fix: 'Choose the column, or say that the sheet’s name or a title carries it.'
  });
  return false;
}
