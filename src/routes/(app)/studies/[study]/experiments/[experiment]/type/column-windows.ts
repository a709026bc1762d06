import type { TypingColumn } from '$lib/views/typing';

/** More cells than this make a page slow to type on. */
const cellsAtOnce = 1200;

export interface ColumnWindow {
  /** Indices into the grid's columns; preparation columns are always shown. */
  readonly from: number;
  readonly to: number;
  /** "Atrazine to Carbamazepine" */
  readonly label: string;
}

/** Parts of a wide grid, each small enough to be typed on; one part where all of it is. */
export function columnWindows(rowCount: number, columns: readonly TypingColumn[]): readonly ColumnWindow[] {
  const first = columns.findIndex(({ kind }) => kind !== 'preparation');
  if (first < 0) return [];
  const values = columns.length - first;
  const most = Math.max(5, Math.floor(cellsAtOnce / Math.max(1, rowCount)));
  const parts = Math.ceil(values / most);
  const width = Math.ceil(values / parts);
  return Array.from({ length: parts }, (_, part) => {
    const from = first + part * width;
    const to = Math.min(columns.length, from + width);
    return { from, to, label: `${columns[from]?.label ?? ''} to ${columns[to - 1]?.label ?? ''}` };
  });
}

/** 1,200 */
export function gridSize(count: number): string {
  return count.toLocaleString('en-GB');
}
