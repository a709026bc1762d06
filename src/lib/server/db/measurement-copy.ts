import { Readable } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import { from as copyFrom } from 'pg-copy-streams';
import type { MeasurementState, ReportedBasis } from '../../domain/vocabulary';
import { transactionClient } from './transaction';

/** One reported number on its way into the table; ids resolved and parents locked by whoever stores it. */
export interface NewMeasurement {
  readonly labId: string;
  readonly importId: string;
  readonly injectionId: string;
  /** Exactly one of the two is given. */
  readonly experimentId: string | null;
  readonly calibrationSetId: string | null;
  readonly analyteId: string;
  readonly basis: ReportedBasis;
  readonly state: MeasurementState;
  readonly reported: number | null;
  readonly internalArea: number | null;
  readonly internalAnalyteId: string | null;
  readonly limitValue: number | null;
  readonly rawText: string;
  /** 1-based into the import's sheet names; row and column 1-based. */
  readonly sheet: number;
  readonly sheetRow: number;
  readonly sheetColumn: number;
}

/** What the file says about the peak of a measurement, on its way into its table. */
export interface NewQualifier {
  readonly labId: string;
  readonly studyId: string;
  readonly importId: string;
  readonly injectionId: string;
  readonly analyteId: string;
  readonly retentionTimeMin: number | null;
  readonly ionRatio: number | null;
  readonly signalToNoise: number | null;
  /** null: not integrated by hand. */
  readonly manualIntegration: { readonly cause: string | null } | null;
}

const columns = [
  'lab_id',
  'import_id',
  'injection_id',
  'experiment_id',
  'calibration_set_id',
  'analyte_id',
  'basis',
  'state',
  'reported',
  'internal_area',
  'internal_analyte_id',
  'limit_value',
  'raw_text',
  'sheet',
  'sheet_row',
  'sheet_column'
].join(', ');

const escapes: Readonly<Record<string, string>> = {
  '\\': '\\\\',
  '\t': '\\t',
  '\n': '\\n',
  '\r': '\\r',
  '\u0000': '\uFFFD'
};

// eslint-disable-next-line no-control-regex -- U+0000 cannot be stored in PostgreSQL's text
const special = /[\\\t\n\r\u0000]/g;

const escaped = (text: string): string =>
  text.replace(special, (character) => escapes[character] ?? character);
const orNull = (value: string | number | null): string => (value === null ? '\\N' : String(value));

/** One line of COPY's text format. @throws RangeError on a number that is not finite */
export function copyLine(row: NewMeasurement): string {
  for (const value of [row.reported, row.internalArea, row.limitValue]) {
    if (value !== null && !Number.isFinite(value)) throw new RangeError('a measurement is a finite number');
  }
  return `${row.labId}\t${row.importId}\t${row.injectionId}\t${orNull(row.experimentId)}\t${orNull(row.calibrationSetId)}\t${row.analyteId}\t${row.basis}\t${row.state}\t${orNull(row.reported)}\t${orNull(row.internalArea)}\t${orNull(row.internalAnalyteId)}\t${orNull(row.limitValue)}\t${escaped(row.rawText)}\t${row.sheet}\t${row.sheetRow}\t${row.sheetColumn}\n`;
}

const qualifierColumns =
  'lab_id, study_id, import_id, injection_id, analyte_id, retention_time_min, ion_ratio, signal_to_noise, is_manual, manual_cause';

function qualifierLine(row: NewQualifier): string {
  const cause = row.manualIntegration?.cause ?? null;
  return `${row.labId}\t${row.studyId}\t${row.importId}\t${row.injectionId}\t${row.analyteId}\t${orNull(row.retentionTimeMin)}\t${orNull(row.ionRatio)}\t${orNull(row.signalToNoise)}\t${row.manualIntegration !== null}\t${cause === null ? '\\N' : escaped(cause)}\n`;
}

const chunkLength = 64 * 1024;

function* chunks<Row>(rows: Iterable<Row>, lineOf: (row: Row) => string): Generator<string> {
  let chunk = '';
  for (const row of rows) {
    chunk += lineOf(row);
    if (chunk.length >= chunkLength) {
      yield chunk;
      chunk = '';
    }
  }
  if (chunk) yield chunk;
}

/**
 * Copies measurements in on the running transaction's own connection: all of them, or none when anything throws.
 * @returns how many rows were stored
 * @throws Error outside of `inTransaction`; whatever the database refuses (the import must be in state received)
 */
export function copyMeasurements(rows: Iterable<NewMeasurement>): Promise<number> {
  return copy(`COPY measurements (${columns}) FROM STDIN`, chunks(rows, copyLine));
}

/** As `copyMeasurements`, for what the file says about their peaks; without any the database is not asked. */
export async function copyQualifiers(rows: readonly NewQualifier[]): Promise<number> {
  if (rows.length === 0) return 0;
  return copy(`COPY measurement_qualifiers (${qualifierColumns}) FROM STDIN`, chunks(rows, qualifierLine));
}

async function copy(statement: string, lines: Iterable<string>): Promise<number> {
  const stream = transactionClient().query(copyFrom(statement));
  await pipeline(Readable.from(lines, { objectMode: false }), stream);
  return stream.rowCount;
}
