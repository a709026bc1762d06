import type { ColumnMap } from '../../schemas/column-map';
import { cellAddress } from './cell-address';
import { carriedBy } from './carried-names';
import { checkCompleteness } from './check-completeness';
import { checkFellows } from './check-fellows';
import { checkCalibratedRange, checkInternalStandards } from './check-ranges';
import { checkRecords } from './check-records';
import { labelsOf } from './column-map';
import { joinEvidence } from './decimal-evidence';
import { decimalMarks } from './decimal-marks';
import { namesOf } from './import-names';
import { LabelReader } from './label-reader';
import { mapSheet } from './map-sheet';
import type { DraftRecord } from './map-sheet';
import { planTables } from './plan-tables';
import type { PlannedTable } from './plan-tables';
import { ProblemList } from './problems';
import type { RecogniseContext } from './recognise-table';
import { isTemplateWelcome, noteEncoding } from './report-unread';
import { runOrderOf } from './run-order';
import { cellAt } from './sheet';
import { readTemplateMark } from './template-mark';
import { dateOrderOf } from './text-date';
import { reportUnusedColumns } from './unused-columns';
import type { Assignment, Expectation, MappedImport, MappedRecord, SheetReading, Workbook } from './types';
import { ValueTally } from './value-tally';

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
