import { StatsError } from './errors';
import { finite, notNegative } from './guards';
import type { Value } from './types';

/** Values of one replicate by fraction name. */
export type FractionRecord = Readonly<Record<string, Value>>;

export const missing = 0;
export const found = 1;
export const notDetected = 2;

/**
 * Replicates as a table, one row each, one column per fraction, beginning at `start` of its two arrays: what is there, and the
 * value, for not-detected its limit.
 */
export type FractionTable = {
  readonly rows: number;
  readonly columns: number;
  readonly start: number;
  readonly state: Uint8Array;
  readonly values: Float64Array;
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
  const state = new Uint8Array(size);
  const values = new Float64Array(size);
  replicates.forEach((record, row) => {
    let seen = 0;
    names.forEach((name, column) => {
      if (!Object.hasOwn(record, name)) return;
      seen += 1;
      const value = record[name];
      if (value === null || value === undefined) return;
      const cell = row * columns + column;
      if (typeof value === 'object') {
        state[cell] = notDetected;
        values[cell] = notNegative(value.below, `${what} ${row + 1}, limit of "${name}"`);
      } else {
        state[cell] = found;
        values[cell] = finite(value, `${what} ${row + 1}, fraction "${name}"`);
      }
    });
    if (seen < Object.keys(record).length) {
      const stranger = Object.keys(record).find((key) => !names.includes(key));
      throw new StatsError(
        'mismatch',
        `${what} ${row + 1} holds "${stranger}", which is not among the fractions given.`
      );
    }
  });
  return { rows: replicates.length, columns, start: 0, state, values };
}

/** Rows that hold something in every one of the columns, and those that do not. */
export function splitComplete(
  table: FractionTable,
  columns: readonly number[]
): { complete: number[]; incomplete: number[] } {
  const complete: number[] = [];
  const incomplete: number[] = [];
  for (let row = 0; row < table.rows; row += 1) {
    const begin = table.start + row * table.columns;
    let lacks = false;
    for (const column of columns) {
      if (table.state[begin + column] === missing) lacks = true;
    }
    (lacks ? incomplete : complete).push(row);
  }
  return { complete, incomplete };
}

/** Sum over the columns for each of the rows, not-detected values as zero ('low') or at their limit ('high'). */
export function rowSums(
  table: FractionTable,
  rows: readonly number[],
  columns: readonly number[],
  side: 'low' | 'high'
): number[] {
  const sums: number[] = [];
  for (const row of rows) {
    const begin = table.start + row * table.columns;
    let sum = 0;
    for (const column of columns) {
      if (side === 'high' || table.state[begin + column] !== notDetected)
        sum += table.values[begin + column]!;
    }
    sums.push(sum);
  }
  return sums;
}

/** A cell's value with not-detected as zero. */
export function lowValue(table: FractionTable, row: number, column: number): number {
  const cell = table.start + row * table.columns + column;
  return table.state[cell] === notDetected ? 0 : table.values[cell]!;
}

/** How many cells of the rows and columns were not detected. */
export function countNotDetected(
  table: FractionTable,
  rows: readonly number[],
  columns: readonly number[]
): number {
  let count = 0;
  for (const row of rows) {
    const begin = table.start + row * table.columns;
    for (const column of columns) {
      if (table.state[begin + column] === notDetected) count += 1;
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
