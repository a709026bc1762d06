import { cellAt } from './sheet';
import type { Cell, Sheet } from './types';

/** Reads a sheet with every cell of a merged block showing what its top left cell holds. */
export type CellReader = (row: number, column: number) => Cell | null;

export function mergeAwareReader(sheet: Sheet): CellReader {
  if (sheet.merges.length === 0) return (row, column) => cellAt(sheet, row, column);
  // By column: blocks are few and narrow, and each lookup then looks at its own column's blocks only.
  const byColumn = new Map<number, { top: number; bottom: number; left: number }[]>();
  for (const { top, left, bottom, right } of sheet.merges) {
    for (let column = left; column <= Math.min(right, sheet.columnCount - 1); column++) {
      const blocks = byColumn.get(column) ?? [];
      blocks.push({ top, bottom, left });
      byColumn.set(column, blocks);
    }
  }
  for (const blocks of byColumn.values()) blocks.sort((one, other) => one.top - other.top);
  return (row, column) => {
    const block = findBlock(byColumn.get(column), row);
    return block ? cellAt(sheet, block.top, block.left) : cellAt(sheet, row, column);
  };
}

function findBlock<T extends { readonly top: number; readonly bottom: number }>(
  blocks: readonly T[] | undefined,
  row: number
): T | null {
  if (!blocks) return null;
  let low = 0;
  let high = blocks.length - 1;
  while (low <= high) {
    const middle = (low + high) >> 1;
    const block = blocks[middle];
    if (!block) return null;
    if (row < block.top) high = middle - 1;
    else if (row > block.bottom) low = middle + 1;
    else return block;
  }
  return null;
}
