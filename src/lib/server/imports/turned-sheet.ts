import type { Sheet } from './types';

/** Columns are numbered in 16 bits. */
const mostRows = 0xffff;

/**
 * The sheet with its rows as columns and its columns as rows, so that a table with the analytes down is read as one with
 * the analytes across.
 *
 * @returns null for a sheet that is too long to be one
 */
export function turnedSheet(sheet: Sheet): Sheet | null {
  if (sheet.rowCount > mostRows) return null;
  const { columns, kinds, values, rowNumbers, rowStarts } = sheet;
  const next = new Uint32Array(sheet.columnCount + 1);
  for (const column of columns) next[column + 1] = (next[column + 1] ?? 0) + 1;
  const lines: number[] = [];
  const starts: number[] = [];
  for (let column = 0; column < sheet.columnCount; column++) {
    const count = next[column + 1] ?? 0;
    if (count > 0) {
      lines.push(column);
      starts.push(next[column] ?? 0);
    }
    next[column + 1] = count + (next[column] ?? 0);
  }
  starts.push(columns.length);
  const turned = {
    columns: new Uint16Array(columns.length),
    kinds: new Uint8Array(columns.length),
    values: new Float64Array(columns.length)
  };
  // Row by row, so that what was above comes first within each line.
  for (let at = 0; at < rowNumbers.length; at++) {
    for (let index = rowStarts[at] ?? 0; index < (rowStarts[at + 1] ?? 0); index++) {
      const column = columns[index] ?? 0;
      const target = next[column] ?? 0;
      next[column] = target + 1;
      turned.columns[target] = rowNumbers[at] ?? 0;
      turned.kinds[target] = kinds[index] ?? 0;
      turned.values[target] = values[index] ?? 0;
    }
  }
  return {
    ...turned,
    name: sheet.name,
    hidden: sheet.hidden,
    rowCount: sheet.columnCount,
    columnCount: sheet.rowCount,
    rowNumbers: Uint32Array.from(lines),
    rowStarts: Uint32Array.from(starts),
    texts: sheet.texts,
    merges: sheet.merges.map(({ top, left, bottom, right }) => ({
      top: left,
      left: top,
      bottom: right,
      right: bottom
    }))
  };
}
