import type { Cell, Sheet } from './types';

/** The kinds of cell in the order of their numbers in `Sheet.kinds`. */
export const cellKinds = ['number', 'text', 'boolean', 'date', 'error', 'formula'] as const;
export const kindNumber = { number: 0, text: 1, boolean: 2, date: 3, error: 4, formula: 5 } as const;

/**
 * @param row zero-based
 * @param column zero-based
 * @returns the cell, or null where nothing is
 */
export function cellAt(sheet: Sheet, row: number, column: number): Cell | null {
  const at = findSorted(sheet.rowNumbers, row, 0, sheet.rowNumbers.length);
  if (at < 0) return null;
  const index = findSorted(sheet.columns, column, sheet.rowStarts[at] ?? 0, sheet.rowStarts[at + 1] ?? 0);
  return index < 0 ? null : cellOf(sheet, index);
}

/** The filled cells of one row (zero-based) from left to right. */
export function rowCells(
  sheet: Sheet,
  row: number
): readonly { readonly column: number; readonly cell: Cell }[] {
  const at = findSorted(sheet.rowNumbers, row, 0, sheet.rowNumbers.length);
  if (at < 0) return [];
  const cells: { column: number; cell: Cell }[] = [];
  for (let index = sheet.rowStarts[at] ?? 0; index < (sheet.rowStarts[at + 1] ?? 0); index++) {
    cells.push({ column: sheet.columns[index] ?? 0, cell: cellOf(sheet, index) });
  }
  return cells;
}

function cellOf(sheet: Sheet, index: number): Cell {
  const kind = cellKinds[sheet.kinds[index] ?? 0] ?? 'number';
  const value = sheet.values[index] ?? NaN;
  switch (kind) {
    case 'number':
      // The shortest text that gives the same number: what a person sees, without the last digits of its storage.
      return { kind, value, raw: String(value) };
    case 'boolean':
      return { kind, value: value === 1, raw: value === 1 ? 'TRUE' : 'FALSE' };
    case 'date':
      return { kind, value, raw: serialToIso(value) };
    case 'formula':
      return { kind, value: null, raw: sheet.texts[value] ?? '' };
    case 'text':
    case 'error': {
      const text = sheet.texts[value] ?? '';
      return { kind, value: text, raw: text };
    }
  }
}

function findSorted(list: Uint32Array | Uint16Array, wanted: number, from: number, to: number): number {
  let low = from;
  let high = to - 1;
  while (low <= high) {
    const middle = (low + high) >> 1;
    const found = list[middle] ?? 0;
    if (found === wanted) return middle;
    if (found < wanted) low = middle + 1;
    else high = middle - 1;
  }
  return -1;
}

const daysToUnixEpoch = 25_569;
const secondsPerDay = 86_400;

/**
 * A serial date (days since 1899-12-30, the count that spreadsheets of 1900 use from March 1900 on) as ISO 8601
 * without a zone; the time is left out where it is midnight.
 */
export function serialToIso(serial: number): string {
  const seconds = Math.round((serial - daysToUnixEpoch) * secondsPerDay);
  const date = new Date(seconds * 1000);
  if (Number.isNaN(date.getTime())) return String(serial);
  const iso = date.toISOString().slice(0, 19);
  return iso.endsWith('T00:00:00') ? iso.slice(0, 10) : iso;
}

/** @returns the serial date of an ISO 8601 date, with or without a time; null where it is none */
export function isoToSerial(iso: string): number | null {
  if (!/^\d{4}-\d{2}-\d{2}(?:[T ]\d{2}:\d{2}(?::\d{2}(?:\.\d+)?)?Z?)?$/.test(iso)) return null;
  const milliseconds = Date.parse(`${iso.replace(' ', 'T').replace(/Z$/, '')}${iso.length > 10 ? 'Z' : ''}`);
  return Number.isNaN(milliseconds) ? null : milliseconds / 1000 / secondsPerDay + daysToUnixEpoch;
}
