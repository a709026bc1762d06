import { StatsError } from './errors';
import { finite, notNegative } from './guards';
import type { Value } from './types';

/** Values of one replicate by fraction name. */
export type FractionRecord = Readonly<Record<string, Value>>;

export const missing = 0;
export const found = 1;
export const notDetected = 2;

/**
 * Replicates as a table, one row each, one column per fraction: what is there, the value with not-detected as zero, and
 * the value with not-detected at its limit.
 */
export type FractionTable = {
  readonly rows: number;
  readonly columns: number;
  readonly state: Uint8Array;
  readonly low: Float64Array;
  readonly high: Float64Array;
};

/**
 * Reads replicates into a table.
 *
 * @throws StatsError for an undeclared fraction, a value that is not finite, or a negative limit.
 */
export function readFractions(
  replicates: readonly FractionRecord[],
  names: readonly string[],
  what: string
): FractionTable {
  const columns = names.length;
  const size = replicates.length * columns;
  const table = {
    rows: replicates.length,
    columns,
    state: new Uint8Array(size),
    low: new Float64Array(size),
    high: new Float64Array(size)
  };
  replicates.forEach((record, row) => {
    const place = `${what} ${row + 1}`;
    let seen = 0;
    names.forEach((name, column) => {
      if (!Object.hasOwn(record, name)) return;
      seen += 1;
      const value = record[name];
      if (value === null || value === undefined) return;
      const cell = row * columns + column;
      if (typeof value === 'object') {
        table.state[cell] = notDetected;
        table.high[cell] = notNegative(value.below, `${place}, limit of "${name}"`);
      } else {
        table.state[cell] = found;
        table.low[cell] = table.high[cell] = finite(value, `${place}, fraction "${name}"`);
      }
    });
    if (seen < Object.keys(record).length) {
      const stranger = Object.keys(record).find((key) => !names.includes(key));
      throw new StatsError(
        'mismatch',
        `${place} holds "${stranger}", which is not among the fractions given.`
      );
    }
  });
  return table;
}

/** Rows that hold something in every one of the columns, and those that do not. */
export function splitComplete(
  table: FractionTable,
  columns: readonly number[]
): { complete: number[]; incomplete: number[] } {
  const complete: number[] = [];
  const incomplete: number[] = [];
  for (let row = 0; row < table.rows; row += 1) {
    const lacks = columns.some((column) => table.state[row * table.columns + column] === missing);
    (lacks ? incomplete : complete).push(row);
  }
  return { complete, incomplete };
}

/** Sum over the columns for each of the rows, from the `low` or the `high` side of the table. */
export function rowSums(
  table: FractionTable,
  rows: readonly number[],
  columns: readonly number[],
  side: 'low' | 'high'
): number[] {
  const cells = table[side];
  return rows.map((row) => {
    let sum = 0;
    for (const column of columns) sum += cells[row * table.columns + column]!;
    return sum;
  });
}

/** How many cells of the rows and columns were not detected. */
export function countNotDetected(
  table: FractionTable,
  rows: readonly number[],
  columns: readonly number[]
): number {
  let count = 0;
  for (const row of rows) {
    for (const column of columns) {
      if (table.state[row * table.columns + column] === notDetected) count += 1;
    }
  }
  return count;
}

/** Throws when there is no fraction, an unnamed one, or a name used twice. */
export function requireFractionNames(names: readonly string[]): void {
  if (names.length === 0) throw new StatsError('empty-group', 'No fraction is given.');
  const twice = names.find((name, i) => names.indexOf(name) !== i);
  if (twice !== undefined) {
    throw new StatsError('mismatch', `The fraction "${twice}" is given twice.`);
  }
}
