import { planColumns } from './column-plan';
import type { ColumnPlan } from './column-plan';
import { checkRecords } from './check-records';
import { cellAddress, columnLetters } from './cell-address';
import { decimalEvidence, joinEvidence, provenMark } from './decimal-evidence';
import type { DecimalEvidence } from './decimal-evidence';
import { findLayout, isLayout } from './find-layout';
import type { SheetLayout } from './find-layout';
import { mapSheet } from './map-sheet';
import type { DraftRecord } from './map-sheet';
import { NameMatcher } from './name-matcher';
import { PlaceFinder } from './place-finder';
import { ProblemList } from './problems';
import { cellKinds } from './sheet';
import { markSheet, readMeSheet, readTemplateMark } from './template-mark';
import { reportUnusedColumns } from './unused-columns';
import type {
  DecimalMark,
  Expectation,
  MappedImport,
  MappedRecord,
  Sheet,
  SheetReading,
  Workbook
} from './types';

interface PlannedSheet {
  readonly sheet: Sheet;
  readonly layout: SheetLayout;
  readonly plan: ColumnPlan;
  readonly evidence: ReadonlyMap<number, DecimalEvidence>;
}

/**
 * Reads measurements out of a workbook: finds the table of each visible sheet, matches its names with what the study offers, and
 * turns cells into records. Nothing is guessed: what could mean two things becomes a question, what means nothing an error,
 * and all of them come at once.
 *
 * Records are there for the cells that could be read even where others have errors; storing asks for a file without errors.
 *
 * @returns records in the order of the file; problems with errors first
 */
export function mapRecords(workbook: Workbook, expectation: Expectation): MappedImport {
  const problems = new ProblemList();
  const template = readTemplateMark(workbook);
  if (workbook.encoding === 'windows-1252') noteEncoding(workbook, problems);
  if (template && !isTemplateWelcome(template.experimentId, expectation, problems)) {
    return { reading: { template, sheets: [] }, records: [], problems: problems.all() };
  }

  const analytes = panelNames(expectation);
  const planned = planSheets(workbook, analytes, expectation, problems);
  const fileEvidence = joinEvidence(planned.flatMap(({ evidence }) => [...evidence.values()]));
  const places = new PlaceFinder(expectation, template?.experimentId ?? null);
  const corrected = new Set(
    expectation.panel.flatMap(({ id, internalStandard }) => (internalStandard ? [id] : []))
  );
  const hasInternalStandard = (panelEntryId: string): boolean => corrected.has(panelEntryId);
  const drafts: DraftRecord[] = [];
  const readings: SheetReading[] = [];
  for (const { sheet, layout, plan, evidence } of planned) {
    const decimalOf = decimalMarks(
      sheet,
      layout.headerRow,
      evidence,
      fileEvidence,
      expectation.declared.decimal,
      problems
    );
    reportUnusedColumns(sheet, layout, plan, analytes, template !== null, problems);
    const mapped = mapSheet({
      sheet,
      plan,
      headerRow: layout.headerRow,
      analytes,
      places,
      decimalOf,
      hasInternalStandard,
      problems
    });
    for (const draft of mapped) drafts.push(draft);
    readings.push({
      sheet: sheet.name,
      layout: layout.layout,
      headerRow: layout.headerRow,
      basis: plan.values[0]?.basis ?? 'area',
      columns: plan.recognised,
      recordCount: mapped.length
    });
  }
  const volumeColumns = new Map(
    planned.map(({ sheet, plan }) => [sheet.name, plan.finalVolume?.column ?? null])
  );
  const records = checkRecords(drafts, expectation, (name) => volumeColumns.get(name) ?? null, problems);
  return {
    reading: { template, sheets: readings },
    records: records.map(toRecord),
    problems: problems.all()
  };
}

function panelNames(expectation: Expectation): NameMatcher<string> {
  const names = new NameMatcher<string>();
  for (const { id, name, synonyms, cas } of expectation.panel)
    names.add(id, [name, ...synonyms, ...(cas ? [cas] : [])]);
  return names;
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

function planSheets(
  workbook: Workbook,
  analytes: NameMatcher<string>,
  expectation: Expectation,
  problems: ProblemList
): readonly PlannedSheet[] {
  const planned: PlannedSheet[] = [];
  const unread: { sheet: Sheet; report: (severity: 'error' | 'note') => void }[] = [];
  for (const sheet of workbook.sheets) {
    if (sheet.rowCount === 0 || sheet.name === markSheet || sheet.name === readMeSheet) continue;
    if (sheet.hidden) {
      noteHidden(sheet, problems);
      continue;
    }
    const layout = findLayout(sheet, analytes);
    if (!layout || !isLayout(layout)) {
      unread.push({ sheet, report: (severity) => reportUnread(sheet, layout, severity, problems) });
      continue;
    }
    const plan = planColumns(sheet.name, layout, expectation.declared, problems);
    if (plan) planned.push({ sheet, layout, plan, evidence: evidenceOf(sheet, layout.headerRow, plan) });
  }
  // A sheet beside the table (a cover, a method) may go unread; a file without any table may not.
  const severity =
    planned.length === 0 && !problems.all().some(({ severity }) => severity !== 'note') ? 'error' : 'note';
  for (const { report } of unread) report(severity);
  if (planned.length === 0 && unread.length === 0 && severity === 'error') reportNothing(problems);
  return planned;
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
  partial: ReturnType<typeof findLayout>,
  severity: 'error' | 'note',
  problems: ProblemList
): void {
  const add = severity === 'error' ? problems.error.bind(problems) : problems.note.bind(problems);
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
      fix: 'Add it, or name it as in the template.'
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

/** What the number columns of a sheet prove about the decimal mark; only cells that hold text do. */
function evidenceOf(sheet: Sheet, headerRow: number, plan: ColumnPlan): ReadonlyMap<number, DecimalEvidence> {
  const numberColumns = [
    ...plan.values.flatMap(({ column, internalArea }) => [column, internalArea]),
    plan.finalVolume?.column ?? null,
    plan.dilution?.column ?? null,
    plan.aliquotShare?.column ?? null
  ].filter((column) => column !== null);
  const texts = new Map(numberColumns.map((column): [number, Set<string>] => [column, new Set()]));
  const textKind = cellKinds.indexOf('text');
  for (let at = 0; at < sheet.rowNumbers.length; at++) {
    if ((sheet.rowNumbers[at] ?? 0) <= headerRow) continue;
    for (let index = sheet.rowStarts[at] ?? 0; index < (sheet.rowStarts[at + 1] ?? 0); index++) {
      if (sheet.kinds[index] !== textKind) continue;
      texts.get(sheet.columns[index] ?? 0)?.add(sheet.texts[sheet.values[index] ?? 0] ?? '');
    }
  }
  return new Map([...texts].map(([column, found]) => [column, decimalEvidence(found)]));
}

/** The mark of each column: as declared, else as the column proves, else, where it proves nothing, as the file does. */
function decimalMarks(
  sheet: Sheet,
  headerRow: number,
  evidence: ReadonlyMap<number, DecimalEvidence>,
  fileEvidence: DecimalEvidence,
  declared: DecimalMark | null,
  problems: ProblemList
): (column: number) => DecimalMark | null {
  const marks = new Map<number, DecimalMark | null>();
  for (const [column, own] of evidence) {
    if (declared === null && own.point !== null && own.comma !== null) {
      problems.question({
        code: 'mixed separators',
        sheet: sheet.name,
        row: headerRow,
        column,
        found: `“${own.point}” and “${own.comma}”`,
        expected: 'one decimal mark in a column',
        what: `Column ${columnLetters(column)} has decimal points and decimal commas, “${own.point}” and “${own.comma}”. Each can be read in one way only; is the column in order?`,
        fix: 'Confirm to read each as it stands, or make the column uniform.'
      });
    }
    const isSilent = own.point === null && own.comma === null;
    marks.set(column, declared ?? provenMark(isSilent ? fileEvidence : own));
  }
  return (column) => marks.get(column) ?? declared;
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
    acquiredAt: draft.acquiredAt
  };
}
