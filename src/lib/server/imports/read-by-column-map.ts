import { nameKey } from '../../domain/name-key';
import type { CarriedName, ColumnMap, TableMap } from '../../schemas/column-map';
import { cellAddress } from './cell-address';
import { checkCompleteness } from './check-completeness';
import { checkFellows } from './check-fellows';
import { checkCalibratedRange, checkInternalStandards } from './check-ranges';
import { checkRecords } from './check-records';
import { labelsOf, readableSheets } from './column-map';
import { planColumns } from './column-plan';
import type { ColumnPlan } from './column-plan';
import { joinEvidence } from './decimal-evidence';
import type { DecimalEvidence } from './decimal-evidence';
import { decimalMarks, evidenceOf } from './decimal-marks';
import { findLayout, isLayout } from './find-layout';
import { namesOf } from './import-names';
import { LabelReader } from './label-reader';
import { mapSheet } from './map-sheet';
import type { DraftRecord } from './map-sheet';
import { nameIn, namedText } from './named-text';
import type { NamedText } from './named-text';
import { ProblemList } from './problems';
import type { Problems } from './problems';
import type { RecogniseContext } from './recognise-table';
import { runOrderOf } from './run-order';
import { cellAt } from './sheet';
import { sectionsOf } from './sheet-sections';
import type { Section } from './sheet-sections';
import { readTemplateMark } from './template-mark';
import { dateOrderOf } from './text-date';
import { turnedSheet } from './turned-sheet';
import { reportUnusedColumns } from './unused-columns';
import type {
  Assignment,
  Expectation,
  MappedImport,
  MappedRecord,
  Sheet,
  SheetReading,
  Workbook
} from './types';
import { ValueTally } from './value-tally';

interface PlannedTable {
  readonly table: TableMap;
  /** Turned where the analytes stand below each other. */
  readonly view: Sheet;
  readonly sections: readonly Section[];
  readonly headerRow: number;
  readonly plan: ColumnPlan;
  readonly evidence: ReadonlyMap<number, DecimalEvidence>;
  readonly problems: Problems;
}

/**
 * Reads measurements out of a workbook as a column map says, matches its names with what the study offers, and turns cells into
 * records. Nothing is guessed: what could mean two things becomes a question, what means nothing an error, and all of them
 * come at once.
 *
 * Records are there for the cells that could be read even where others have errors; storing asks for a file without errors.
 *
 * @returns records in the order of the file; problems with errors first; what every text in a value cell was taken for; what every label
 * means
 */
export function readByColumnMap(workbook: Workbook, map: ColumnMap, expectation: Expectation): MappedImport {
  const problems = new ProblemList();
  const template = readTemplateMark(workbook);
  if (workbook.encoding === 'windows-1252') noteEncoding(workbook, problems);
  if (template && !isTemplateWelcome(template.experimentId, expectation, problems)) {
    return {
      map,
      savedMap: null,
      reading: { template, sheets: [] },
      records: [],
      problems: problems.all(),
      valueMeanings: [],
      labels: []
    };
  }

  const names = namesOf(workbook, expectation);
  const planned = planTables(workbook, map, names, expectation, problems);
  const fileEvidence = joinEvidence(planned.flatMap(({ evidence }) => [...evidence.values()]));
  const decimal = expectation.declared.decimal ?? map.decimal;
  const labels = labelReader(workbook, map, names, expectation, problems);
  const corrected = new Set(
    expectation.panel.flatMap(({ id, internalStandard }) => (internalStandard ? [id] : []))
  );
  const values = new ValueTally();
  const drafts: DraftRecord[] = [];
  const readings: SheetReading[] = [];
  for (const each of planned) {
    const { table, view, sections, headerRow, plan, evidence } = each;
    const isTurned = table.orientation === 'analytes down';
    const at = { sheet: view.name, headerRow, isTurned };
    const decimalOf = decimalMarks(at, evidence, fileEvidence, decimal, each.problems);
    reportUnusedColumns(view, sections, {
      table,
      plan,
      analytes: names.analytes,
      isTemplate: template !== null,
      problems: each.problems
    });
    const before = drafts.length;
    const shared = {
      sheet: view,
      isTurned,
      plan,
      headerRow,
      leftOut: new Set(table.leftOut),
      fixed: map.fixed,
      analytes: names.analytes,
      places: names.places,
      labels,
      decimalOf,
      dateOrder: map.dateOrder ?? provenDateOrder(each),
      hasInternalStandard: (panelEntryId: string) => corrected.has(panelEntryId),
      values,
      problems: each.problems
    };
    for (const section of sections) {
      const carried = carriedBy(each, section, names);
      for (const draft of mapSheet({ ...shared, carried, from: section.from, to: section.to }))
        drafts.push(draft);
    }
    readings.push(readingOf(each, drafts.length - before));
  }
  if (!map.isPatternConfirmed) askAboutPattern(map, labels, problems);
  const records = checkRecords(drafts, expectation, problems);
  askAboutValues(records, expectation, problems);
  return {
    map,
    savedMap: null,
    reading: { template, sheets: readings },
    records: records.map(toRecord),
    problems: problems.all(),
    valueMeanings: values.all(),
    labels: labels.readings()
  };
}

/** Numbers that can be read and yet look wrong. */
function askAboutValues(
  records: readonly DraftRecord[],
  expectation: Expectation,
  problems: ProblemList
): void {
  const panel = new Map(expectation.panel.map((entry) => [entry.id, entry]));
  checkCalibratedRange(records, panel, problems);
  checkInternalStandards(records, expectation, problems);
  checkFellows(records, expectation, panel, problems);
  checkCompleteness(records, expectation, problems);
}

function readingOf({ table, view, headerRow, plan }: PlannedTable, recordCount: number): SheetReading {
  const isTurned = table.orientation === 'analytes down';
  return {
    sheet: view.name,
    layout: table.orientation === 'long' ? 'long' : 'wide',
    orientation: table.orientation,
    headerRow: isTurned ? (plan.sample ?? 0) : headerRow,
    basis: plan.values[0]?.basis ?? 'area',
    columns: plan.recognised,
    recordCount
  };
}

function labelReader(
  workbook: Workbook,
  map: ColumnMap,
  { places }: RecogniseContext,
  expectation: Expectation,
  problems: ProblemList
): LabelReader {
  const assignments = new Map<string, Assignment>(Object.entries(expectation.declared.assignments ?? {}));
  const runOrder =
    map.matching === 'names'
      ? null
      : runOrderOf(labelsOf(workbook, map.tables), assignments, expectation, problems);
  return new LabelReader(places, { pattern: map.samplePattern, assignments, runOrder });
}

function askAboutPattern(map: ColumnMap, labels: LabelReader, problems: ProblemList): void {
  const split = labels.readings().filter(({ how }) => how === 'pattern');
  const [first] = split;
  if (!first) return;
  problems.question({
    code: 'pattern not confirmed',
    sheet: first.sheet,
    found: `“${first.label}”`,
    expected: 'labels as the study has them, or a pattern that somebody confirmed',
    what: `${split.length === 1 ? 'One label is' : `${split.length} labels are`} taken apart by the pattern ${map.samplePattern}: “${first.label}” is read as ${first.place}. Is that right?`,
    fix: 'Confirm, or change the pattern.'
  });
}

function noteEncoding(workbook: Workbook, problems: ProblemList): void {
  problems.note({
    code: 'text encoding',
    sheet: workbook.sheets[0]?.name ?? null,
    found: 'text that is not UTF-8',
    expected: 'UTF-8',
    what: 'This text file is not in UTF-8 and was read as Western European text.',
    fix: 'Look whether µ, accents and dashes came out right; if not, save the file as UTF-8.'
  });
}

function isTemplateWelcome(experimentId: string, expectation: Expectation, problems: ProblemList): boolean {
  const made = expectation.experiments.find(({ id }) => id === experimentId);
  const wanted = expectation.experiments.find(({ id }) => id === expectation.experimentId);
  if (made && (!wanted || wanted.id === made.id)) return true;
  problems.error({
    code: 'other experiment',
    sheet: null,
    found: made ? `the template of ${made.title}` : 'the template of an experiment that is not in this study',
    expected: wanted ? `the template of ${wanted.title}` : 'the template of an experiment of this study',
    what: made
      ? `This template was made for ${made.title}, and was brought to ${wanted?.title ?? 'another experiment'}.`
      : 'This template was made for an experiment that is not in this study.',
    fix: made
      ? `Bring it to ${made.title}, or download the template anew.`
      : 'Bring it to its own study, or download the template anew.'
  });
  return false;
}

function planTables(
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
  for (const sheet of unread) reportUnread(sheet, names, severity, problems);
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

/** The names that a sheet, a title or a block carries for the rows of a section. */
function carriedBy(
  { table, view, problems }: PlannedTable,
  section: Section,
  names: RecogniseContext
): Partial<Record<CarriedName, NamedText>> {
  const found: Partial<Record<CarriedName, NamedText>> = {};
  const ofSheet: NamedText = { text: view.name, row: null, column: null };
  for (const carried of table.carried) {
    const titles: readonly NamedText[] =
      carried.from === 'sheet name'
        ? [ofSheet]
        : carried.from === 'block title'
          ? section.titles
          : [
              {
                text: cellAt(view, carried.row, carried.column)?.raw ?? '',
                row: carried.row,
                column: carried.column
              }
            ];
    const text = namedText(titles, carried.names, names);
    if (!text) continue;
    found[carried.names] = text;
    if (carried.from !== 'sheet name') askAboutSheetName(text, carried.names, view.name, names, problems);
  }
  return found;
}

function askAboutSheetName(
  title: NamedText,
  what: CarriedName,
  sheetName: string,
  names: RecogniseContext,
  problems: Problems
): void {
  const other = what === 'sample' ? null : nameIn(sheetName, what, names);
  if (other === null || isSame(other, title.text, what, names)) return;
  problems.oncePer(`${what} ${title.text}`, 'question', {
    code: 'title contradicts',
    sheet: sheetName,
    ...(title.row === null || title.column === null ? {} : { row: title.row, column: title.column }),
    found: `“${title.text}”`,
    expected: `the ${what} that the sheet’s name says, ${other}`,
    what: `The title says ${title.text}, the name of the sheet says ${other}. It is read as ${title.text}; is that right?`,
    fix: 'Confirm, or correct the one that is wrong.'
  });
}

function isSame(one: string, other: string, what: CarriedName, { analytes }: RecogniseContext): boolean {
  if (nameKey(one) === nameKey(other)) return true;
  if (what !== 'analyte') return false;
  const [first, second] = [analytes.match(one), analytes.match(other)];
  return first.kind === 'one' && second.kind === 'one' && first.value === second.value;
}

function provenDateOrder({ view, sections, plan }: PlannedTable): ReturnType<typeof dateOrderOf> {
  const { acquiredAt } = plan;
  if (acquiredAt === null) return null;
  const texts = new Set<string>();
  for (const { from, to } of sections) {
    for (let at = from; at < to; at++) {
      const cell = cellAt(view, view.rowNumbers[at] ?? 0, acquiredAt);
      if (cell?.kind === 'text') texts.add(cell.value);
    }
  }
  return dateOrderOf(texts);
}

function noteHidden(sheet: Sheet, problems: ProblemList): void {
  problems.note({
    code: 'sheet not read',
    sheet: sheet.name,
    found: 'a hidden sheet',
    expected: 'visible sheets',
    what: 'This sheet is hidden and was not read.',
    fix: 'Show it and bring the file again if its results belong to the import.'
  });
}

function reportNothing(problems: ProblemList): void {
  problems.error({
    code: 'nothing recognised',
    sheet: null,
    found: 'no visible sheet with a table',
    expected: 'a table with a header line',
    what: 'No visible sheet of this file holds a table.',
    fix: 'Show the sheet with the results, or fill in the template of the experiment.'
  });
}

function reportUnread(
  sheet: Sheet,
  { analytes }: RecogniseContext,
  severity: 'error' | 'note',
  problems: ProblemList
): void {
  const add = severity === 'error' ? problems.error.bind(problems) : problems.note.bind(problems);
  const partial = findLayout(sheet, analytes);
  if (partial && !isLayout(partial)) {
    const missing = partial.missing.join(' and ');
    add({
      code: severity === 'error' ? 'missing column' : 'sheet not read',
      sheet: sheet.name,
      row: partial.headerRow,
      column: 0,
      found: partial.seen.map((text) => `“${text}”`).join(', '),
      expected: missing,
      what: `Row ${partial.headerRow + 1} looks like the header line, but ${missing} is missing.`,
      fix: 'Add it, name it as in the template, or say in the column map where it stands.'
    });
    return;
  }
  add({
    code: severity === 'error' ? 'nothing recognised' : 'sheet not read',
    sheet: sheet.name,
    found: 'no header line',
    expected: 'a header line with the sample, and the analyte with its result or a column for each analyte',
    what: `No header line was found in the first rows (to ${cellAddress(Math.min(sheet.rowCount, 60) - 1, Math.max(sheet.columnCount - 1, 0))}).`,
    fix: 'Head the columns as in the template of the experiment; titles above the header are fine.'
  });
}

function toRecord(draft: DraftRecord): MappedRecord {
  return {
    sheet: draft.sheet,
    row: draft.row,
    column: draft.column,
    cell: cellAddress(draft.row, draft.column),
    place: draft.place,
    panelEntryId: draft.panelEntryId,
    injection: draft.injection,
    reported: { kind: draft.basis, value: draft.value, internalArea: draft.internalArea },
    state: draft.state,
    limit: draft.limit,
    rawText: draft.rawText,
    finalVolumeMl: draft.finalVolumeMl,
    dilution: draft.dilution,
    aliquotShare: draft.aliquotShare,
    acquiredAt: draft.acquiredAt,
    qualifiers: draft.qualifiers
  };
}
