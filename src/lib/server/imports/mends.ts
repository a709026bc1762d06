import { parseAddress } from './cell-address';
import { cellAt, kindNumber } from './sheet';
import type { Sheet, Workbook } from './types';

/** A cell that a person read otherwise than it stands in the file. The file keeps the cell as it came. */
export interface CellMend {
  readonly sheet: string;
  /** "F18" */
  readonly cell: string;
  /** What counts in place of what stands there; empty: the cell counts as blank. */
  readonly text: string;
  /** What stands there. */
  readonly original: string;
}

interface NewCell {
  readonly row: number;
  readonly column: number;
  readonly kind: number;
  readonly value: number;
}

const plainNumber = /^[-+]?(?:\d+\.?\d*|\.\d+)(?:[eE][-+]?\d{1,3})?$/;

/**
 * The workbook as its mends make it: what is read is the mended cells and all others as they are. A plain number is a number, everything
 * else a text that is read like any text of the file. Nothing given is changed.
 *
 * @throws RangeError for a mend of a sheet that is not there or a place that is none
 */
export function withMends(workbook: Workbook, mends: readonly CellMend[]): Workbook {
  if (mends.length === 0) return workbook;
  const texts = [...(workbook.sheets[0]?.texts ?? [])];
  const bySheet = new Map<string, Map<string, NewCell | null>>();
  for (const { sheet, cell, text } of mends) {
    const place = parseAddress(cell);
    if (!place || !workbook.sheets.some(({ name }) => name === sheet)) {
      throw new RangeError(`There is no cell ${cell} in a sheet ${sheet}.`);
    }
    const cells = bySheet.get(sheet) ?? new Map<string, NewCell | null>();
    bySheet.set(sheet, cells);
    const typed = text.trim();
    const isNumber = plainNumber.test(typed) && Number.isFinite(Number(typed));
    cells.set(
      `${place.row} ${place.column}`,
      typed === ''
        ? null
        : {
            ...place,
            kind: isNumber ? kindNumber.number : kindNumber.text,
            value: isNumber ? Number(typed) : texts.push(typed) - 1
          }
    );
  }
  return {
    ...workbook,
    sheets: workbook.sheets.map((sheet) => {
      const cells = bySheet.get(sheet.name);
      return cells ? replaced(sheet, cells, texts) : { ...sheet, texts };
    })
  };
}

function replaced(
  sheet: Sheet,
  mended: ReadonlyMap<string, NewCell | null>,
  texts: readonly string[]
): Sheet {
  const cells: NewCell[] = [];
  const waiting = new Map(mended);
  sheet.rowNumbers.forEach((row, at) => {
    for (let index = sheet.rowStarts[at] ?? 0; index < (sheet.rowStarts[at + 1] ?? 0); index++) {
      const column = sheet.columns[index] ?? 0;
      const mend = waiting.get(`${row} ${column}`);
      waiting.delete(`${row} ${column}`);
      if (mend === null) continue;
      cells.push(mend ?? { row, column, kind: sheet.kinds[index] ?? 0, value: sheet.values[index] ?? 0 });
    }
  });
  for (const mend of waiting.values()) if (mend) cells.push(mend);
  cells.sort((one, other) => one.row - other.row || one.column - other.column);

  const rowNumbers: number[] = [];
  const rowStarts: number[] = [];
  cells.forEach(({ row }, index) => {
    if (row === rowNumbers.at(-1)) return;
    rowNumbers.push(row);
    rowStarts.push(index);
  });
  rowStarts.push(cells.length);
  return {
    ...sheet,
    rowCount: (rowNumbers.at(-1) ?? -1) + 1,
    columnCount: cells.reduce((most, { column }) => Math.max(most, column + 1), 0),
    rowNumbers: Uint32Array.from(rowNumbers),
    rowStarts: Uint32Array.from(rowStarts),
    columns: Uint16Array.from(cells, ({ column }) => column),
    kinds: Uint8Array.from(cells, ({ kind }) => kind),
    values: Float64Array.from(cells, ({ value }) => value),
    texts
  };
}

/** What stands at a place of the file, as a person sees it; empty where nothing does. @throws RangeError as `withMends` */
export function originalText(workbook: Workbook, sheetName: string, cell: string): string {
  const place = parseAddress(cell);
  const sheet = workbook.sheets.find(({ name }) => name === sheetName);
  if (!place || !sheet) throw new RangeError(`There is no cell ${cell} in a sheet ${sheetName}.`);
  return cellAt(sheet, place.row, place.column)?.raw ?? '';
}
