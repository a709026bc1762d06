import type { PoolClient } from 'pg';
import type { MeasurementState, ReportedBasis } from '../../domain/vocabulary';

export interface MeasuredInjection {
  readonly id: string;
  readonly importId: string;
  /** Repeated injections of one extract or level count up from 1. */
  readonly number: number;
  readonly dilution: number;
  readonly runAt: Date | null;
}

/** One counting number with the cell it stood in, joined with its injection. */
export interface CountingMeasurement<Injection> {
  /** Within the lab. */
  readonly id: string;
  readonly analyteId: string;
  readonly basis: ReportedBasis;
  readonly state: MeasurementState;
  /** Area, or amount or concentration in the unit of its basis. */
  readonly reported: number | null;
  readonly internalArea: number | null;
  readonly internalAnalyteId: string | null;
  readonly limitValue: number | null;
  readonly rawText: string;
  /** 1-based into the import's sheet names; row and column 1-based. */
  readonly sheet: number;
  readonly sheetRow: number;
  readonly sheetColumn: number;
  readonly importId: string;
  readonly injection: Injection;
}

/** A row as it is read, not joined yet. */
export type Cells = [
  id: string,
  analyteId: string,
  basis: ReportedBasis,
  state: MeasurementState,
  reported: number | null,
  internalArea: number | null,
  internalAnalyteId: string | null,
  limitValue: number | null,
  rawText: string,
  sheet: number,
  sheetRow: number,
  sheetColumn: number,
  importId: string,
  injectionId: string
];

export const selected = `SELECT id, analyte_id, basis, state, reported, internal_area, internal_analyte_id, limit_value, raw_text, sheet,
  sheet_row, sheet_column, import_id, injection_id FROM measurements`;

/** Rows as arrays: half as dear as objects. */
export async function arrays<Row extends unknown[]>(
  client: PoolClient,
  text: string,
  values: unknown[]
): Promise<Row[]> {
  return (await client.query<Row>({ text, values, rowMode: 'array' })).rows;
}

/**
 * Joins numbers with their injections and keeps those that count: of several stored imports with rows for the same place and
 * analyte, the one stored last.
 */
export function counting<Injection extends MeasuredInjection>(
  rows: readonly Cells[],
  injections: ReadonlyMap<string, Injection>,
  imports: ReadonlyMap<string, number>,
  placeOf: (injection: Injection) => string
): CountingMeasurement<Injection>[] {
  const joined: CountingMeasurement<Injection>[] = [];
  for (const [
    id,
    analyteId,
    basis,
    state,
    reported,
    internalArea,
    internalAnalyteId,
    limitValue,
    rawText,
    sheet,
    sheetRow,
    sheetColumn,
    importId,
    injectionId
  ] of rows) {
    const injection = injections.get(injectionId);
    if (!injection || !imports.has(importId)) continue;
    joined.push({
      id,
      analyteId,
      basis,
      state,
      reported,
      internalArea,
      internalAnalyteId,
      limitValue,
      rawText,
      sheet,
      sheetRow,
      sheetColumn,
      importId,
      injection
    });
  }
  if (imports.size < 2) return joined;

  // Injections of one place share its list of analytes, so that a row costs one look-up and no text of its own.
  const places = new Map<string, Map<string, number>>();
  const latest = new Map<Injection, Map<string, number>>();
  for (const injection of injections.values()) {
    const place = placeOf(injection);
    const known = places.get(place) ?? new Map<string, number>();
    places.set(place, known);
    latest.set(injection, known);
  }
  const orderOf = (row: CountingMeasurement<Injection>): number => imports.get(row.importId) ?? 0;
  for (const row of joined) {
    const known = latest.get(row.injection);
    known?.set(row.analyteId, Math.max(known.get(row.analyteId) ?? 0, orderOf(row)));
  }
  return joined.filter((row) => orderOf(row) === latest.get(row.injection)?.get(row.analyteId));
}

/**
 * Reads the numbers that may count. Where later imports cover earlier ones, the rows of the last import of each place come first;
 * of the earlier ones only those for analytes that the last import lacks somewhere, so that what is covered is not brought here at all.
 */
export async function readCountingRows<Injection extends MeasuredInjection>(
  client: PoolClient,
  where: Readonly<{ condition: string; values: readonly unknown[] }>,
  injections: ReadonlyMap<string, Injection>,
  imports: ReadonlyMap<string, number>,
  placeOf: (injection: Injection) => string
): Promise<Cells[]> {
  const text = `${selected} WHERE ${where.condition}`;
  const next = where.values.length + 1;
  const read = (more: string, ...values: unknown[]): Promise<Cells[]> =>
    arrays<Cells>(client, text + more, [...where.values, ...values]);

  const lastOf = new Map<string, number>();
  for (const injection of injections.values()) {
    const order = imports.get(injection.importId);
    if (order === undefined) continue;
    const place = placeOf(injection);
    lastOf.set(place, Math.max(lastOf.get(place) ?? 0, order));
  }
  const last: string[] = [];
  const earlier: string[] = [];
  const overlaid = new Map<string, Set<string>>();
  for (const injection of injections.values()) {
    const order = imports.get(injection.importId);
    if (order === undefined) continue;
    const place = placeOf(injection);
    if (order === lastOf.get(place)) last.push(injection.id);
    else {
      earlier.push(injection.id);
      overlaid.set(place, new Set());
    }
  }
  if (earlier.length === 0) return read('');

  const rows = await read(` AND injection_id = ANY ($${next}::uuid[])`, last);
  for (const row of rows) {
    const injection = injections.get(row[13]);
    if (injection) overlaid.get(placeOf(injection))?.add(row[1]);
  }
  const [first = new Set<string>(), ...others] = overlaid.values();
  const covered = [...first].filter((analyte) => others.every((analytes) => analytes.has(analyte)));
  const rest = await read(
    ` AND injection_id = ANY ($${next}::uuid[]) AND analyte_id <> ALL ($${next + 1}::uuid[])`,
    earlier,
    covered
  );
  return rest.length === 0 ? rows : rows.concat(rest);
}
