import { QueryTypes } from 'sequelize';
import type { Actor } from '../../domain/actor';
import { measurementStates, type MeasurementState } from '../../domain/vocabulary';
import type {
  ImportPreviewView,
  ProblemView,
  RecordView,
  SheetCellView,
  SheetWindowView
} from '../../views/imports';
import { User } from '../db/models/user';
import type { Import } from '../db/models/import';
import type { Study } from '../db/models/study';
import { sequelize } from '../db/sequelize';
import { columnLetters } from '../imports/cell-address';
import { rowCells } from '../imports/sheet';
import type { Expectation, MappedImport, MappedRecord, Sheet, Workbook } from '../imports/types';
import { fileMapView, tableMapView } from './import-map-view';
import { coveredPlaces } from './import-coverage';
import { importDifference } from './import-difference';
import { declaredOf } from './import-expectation';
import { readKeptFile } from './import-reading';
import { importOfStudy } from './imports';
import { require } from './permissions';
import { studyOf } from './study-of';

/** How much of a large file one page shows; the rest is a page on. */
export const previewLimits = { rows: 60, columns: 60, records: 200, problems: 200 } as const;

export interface PreviewWindow {
  /** Which sheet, from 0; null: the first that was read. */
  readonly sheet: number | null;
  /** First row shown, 1-based. */
  readonly fromRow: number;
  readonly fromRecord: number;
}

/** What a received file will become: the sheet as it is, the records, every problem, and what would be covered. */
export async function previewImport(
  actor: Actor,
  studyCode: string,
  importId: string,
  window: PreviewWindow
): Promise<ImportPreviewView> {
  require(actor, 'studies.see');
  const study = await studyOf(actor, studyCode);
  const kept = await importOfStudy(actor, study, importId);
  const frame = await frameOf(study, kept);
  const reading = await readKeptFile(study, kept);
  if (reading.kind === 'refused') return { ...frame, refusal: reading.sentence };

  const { workbook, expectation, mapped } = reading;
  const covered =
    kept.state === 'received'
      ? await coveredPlaces(study, mapped.records, expectation)
      : { count: 0, fileNames: [] };
  const names = namesOf(expectation);
  const recordsOfSheet = new Map(mapped.reading.sheets.map((sheet) => [sheet.sheet, sheet.recordCount]));
  const count = (severity: ProblemView['severity']): number =>
    mapped.problems.filter((problem) => problem.severity === severity).length;

  return {
    ...frame,
    refusal: null,
    sheets: workbook.sheets.map(({ name, hidden }) => ({
      name,
      hidden,
      recordCount: recordsOfSheet.get(name) ?? 0
    })),
    window: sheetWindow(workbook, mapped, window),
    map: fileMapView(reading, declaredOf(kept.declared)),
    records: mapped.records
      .slice(window.fromRecord, window.fromRecord + previewLimits.records)
      .map((record) => recordView(record, names)),
    recordCount: mapped.records.length,
    stateCounts: countStates(mapped.records),
    experiments: touchedExperiments(mapped.records, expectation),
    problems: mapped.problems.slice(0, previewLimits.problems),
    problemCount: mapped.problems.length,
    errorCount: count('error'),
    questionCount: count('question'),
    coveredCount: covered.count,
    coveredFiles: covered.fileNames,
    difference: covered.count > 0 ? await importDifference(study, mapped.records, expectation) : null,
    remarks: await remarksOn(study, mapped.records)
  };
}

async function frameOf(study: Study, kept: Import): Promise<ImportPreviewView> {
  const declared = declaredOf(kept.declared);
  const receiver = await User.findByPk(kept.receivedBy, { attributes: ['name'] });
  const [experiment] = declared.experimentId
    ? await sequelize.query<{ number: number; title: string }>(
        'SELECT number, title FROM experiments WHERE lab_id = $1 AND study_id = $2 AND id = $3',
        { bind: [study.labId, study.id, declared.experimentId], type: QueryTypes.SELECT }
      )
    : [];
  return {
    id: kept.id,
    fileName: kept.fileName,
    byteSize: kept.byteSize,
    sha256: kept.sha256,
    state: kept.state,
    receivedAt: kept.receivedAt.toISOString(),
    receivedBy: receiver?.name ?? '',
    declared: { basis: declared.basis, decimal: declared.decimal },
    experiment: experiment ?? null,
    refusal: null,
    sheets: [],
    window: null,
    map: null,
    records: [],
    recordCount: 0,
    stateCounts: countStates([]),
    experiments: [],
    problems: [],
    problemCount: 0,
    errorCount: 0,
    questionCount: 0,
    coveredCount: 0,
    coveredFiles: [],
    difference: null,
    remarks: []
  };
}

function countStates(records: readonly MappedRecord[]): Record<MeasurementState, number> {
  const counts = Object.fromEntries(measurementStates.map((state) => [state, 0])) as Record<
    MeasurementState,
    number
  >;
  for (const { state } of records) counts[state] += 1;
  return counts;
}

function sheetWindow(
  workbook: Workbook,
  mapped: MappedImport,
  window: PreviewWindow
): SheetWindowView | null {
  const firstRead = workbook.sheets.findIndex(({ name }) =>
    mapped.reading.sheets.some(({ sheet }) => sheet === name)
  );
  const sheet = workbook.sheets[window.sheet ?? Math.max(0, firstRead)];
  if (!sheet) return null;
  const read = mapped.reading.sheets.find((reading) => reading.sheet === sheet.name) ?? null;
  const columnCount = Math.min(sheet.columnCount, previewLimits.columns);
  const first = Math.max(1, Math.min(window.fromRow, Math.max(1, sheet.rowCount)));
  const last = Math.min(sheet.rowCount, first + previewLimits.rows - 1);
  const problems = gravestProblems(mapped, sheet.name);
  return {
    name: sheet.name,
    hidden: sheet.hidden,
    rowCount: sheet.rowCount,
    columnCount: sheet.columnCount,
    read: read && {
      layout: read.layout,
      basis: read.basis,
      headerRow: read.headerRow + 1,
      recordCount: read.recordCount
    },
    map: tableMapView(mapped.map, sheet.name),
    columns: Array.from({ length: columnCount }, (_, column) => ({
      letter: columnLetters(column)
    })),
    rows: Array.from({ length: Math.max(0, last - first + 1) }, (_, offset) => ({
      number: first + offset,
      cells: rowView(sheet, first + offset - 1, columnCount, problems)
    })),
    firstRow: first,
    lastRow: last
  };
}

function gravestProblems(
  mapped: MappedImport,
  sheetName: string
): ReadonlyMap<string, ProblemView['severity']> {
  const weight = { note: 0, question: 1, error: 2 } as const;
  const gravest = new Map<string, ProblemView['severity']>();
  for (const { sheet, cell, severity } of mapped.problems) {
    if (sheet !== sheetName || cell === null) continue;
    const known = gravest.get(cell);
    if (known === undefined || weight[severity] > weight[known]) gravest.set(cell, severity);
  }
  return gravest;
}

function rowView(
  sheet: Sheet,
  row: number,
  columnCount: number,
  problems: ReadonlyMap<string, ProblemView['severity']>
): SheetCellView[] {
  const filled = new Map(rowCells(sheet, row).map(({ column, cell }) => [column, cell]));
  return Array.from({ length: columnCount }, (_, column) => {
    const cell = filled.get(column);
    return {
      text: cell?.raw ?? '',
      numeric: cell?.kind === 'number',
      problem: problems.get(`${columnLetters(column)}${row + 1}`) ?? null
    };
  });
}

interface Names {
  readonly samples: ReadonlyMap<string, string>;
  readonly fractions: ReadonlyMap<string, string>;
  readonly analytes: ReadonlyMap<string, string>;
}

function namesOf(expectation: Expectation): Names {
  const { experiments, calibrationSets, panel } = expectation;
  return {
    samples: new Map([
      ...experiments.flatMap(({ replicates }) => replicates.map(({ id, label }) => [id, label] as const)),
      ...calibrationSets.flatMap(({ levels, checks, name }) =>
        [...levels, ...checks].map((standard) => [standard.id, `${name}, ${standard.name}`] as const)
      )
    ]),
    fractions: new Map(
      experiments.flatMap(({ fractions }) =>
        fractions.map((fraction) => [fraction.id, fraction.name] as const)
      )
    ),
    analytes: new Map(panel.map(({ id, name }) => [id, name]))
  };
}

function recordView(record: MappedRecord, names: Names): RecordView {
  const { place, reported } = record;
  const applied = [
    record.finalVolumeMl === null ? null : `${record.finalVolumeMl} mL`,
    record.dilution === null || record.dilution === 1 ? null : `diluted ${record.dilution}-fold`,
    record.aliquotShare === null || record.aliquotShare === 1 ? null : `share ${record.aliquotShare}`
  ];
  return {
    sheet: record.sheet,
    cell: record.cell,
    sample: names.samples.get(sampleId(place)) ?? '',
    fraction:
      place.kind === 'extract' && place.fractionId ? (names.fractions.get(place.fractionId) ?? null) : null,
    analyte: names.analytes.get(record.panelEntryId) ?? '',
    injection: record.injection,
    state: record.state,
    value: reported.value,
    basis: reported.kind,
    internalArea: reported.internalArea,
    limit: record.limit,
    applied: applied.filter((part) => part !== null).join(', ')
  };
}

function sampleId(place: MappedRecord['place']): string {
  switch (place.kind) {
    case 'extract':
      return place.replicateId;
    case 'level':
      return place.levelId;
    case 'check':
      return place.checkStandardId;
  }
}

function touchedExperiments(records: readonly MappedRecord[], expectation: Expectation): string[] {
  const ids = new Set(records.flatMap(({ place }) => (place.kind === 'extract' ? [place.experimentId] : [])));
  return expectation.experiments.filter(({ id }) => ids.has(id)).map(({ title }) => title);
}

/** Areas can be kept before they can be used; say so rather than let a figure stay away without a word. */
async function remarksOn(study: Study, records: readonly MappedRecord[]): Promise<string[]> {
  const ids = new Set(
    records.flatMap(({ place, reported }) =>
      place.kind === 'extract' && reported.kind === 'area' ? [place.experimentId] : []
    )
  );
  if (ids.size === 0) return [];
  const rows = await sequelize.query<{ number: number; title: string }>(
    `SELECT number, title FROM experiments
      WHERE lab_id = $1 AND study_id = $2 AND id = ANY ($3::uuid[]) AND calibration_set_id IS NULL ORDER BY number`,
    { bind: [study.labId, study.id, [...ids]], type: QueryTypes.SELECT }
  );
  return rows.map(
    ({ number, title }) =>
      `Experiment ${number}, ${title}, names no calibration set. Its areas are kept, and become amounts once a set is chosen.`
  );
}
