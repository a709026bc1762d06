/** Cells of a grid as typed, by row key and column key. */
export type GridValues = Readonly<Record<string, Readonly<Record<string, string>>>>;

export interface CellPlace {
  readonly row: number;
  readonly column: number;
}

/**
 * Text of a spreadsheet's clipboard as rows of cells. Tabs part cells, line ends part rows; a cell in double
 * quotes may hold both, and doubled quotes inside it. The empty line that spreadsheets append is dropped.
 */
export function parsePaste(text: string): string[][] {
  const rows: string[][] = [[]];
  let cell = '';
  let quoted = false;
  const endCell = (): void => {
    rows.at(-1)?.push(cell.trim());
    cell = '';
  };
  for (let i = 0; i < text.length; i += 1) {
    const sign = text.charAt(i);
    if (quoted) {
      if (sign !== '"') cell += sign;
      else if (text.charAt(i + 1) === '"') {
        cell += '"';
        i += 1;
      } else quoted = false;
    } else if (sign === '"' && cell === '' && closesQuote(text, i)) quoted = true;
    else if (sign === '\t') endCell();
    else if (sign === '\n' || sign === '\r') {
      if (sign === '\r' && text.charAt(i + 1) === '\n') i += 1;
      endCell();
      rows.push([]);
    } else cell += sign;
  }
  endCell();
  const last = rows.at(-1);
  if (rows.length > 1 && last?.length === 1 && last[0] === '') rows.pop();
  return rows;
}

/** A quote opens a cell only when its partner ends one; otherwise it is a sign like any other (5" pipe). */
function closesQuote(text: string, start: number): boolean {
  for (let i = start + 1; i < text.length; i += 1) {
    if (text.charAt(i) !== '"') continue;
    if (text.charAt(i + 1) === '"') i += 1;
    else return ['', '\t', '\n', '\r'].includes(text.charAt(i + 1));
  }
  return false;
}

export interface GridShape {
  readonly rows: readonly string[];
  readonly columns: readonly { readonly key: string; readonly readonly?: boolean | undefined }[];
}

export interface Pasted {
  readonly values: GridValues;
  /** Cells that took a value. */
  readonly filled: number;
  /** Cells with content that had no place: beyond the last row or column, or on a column that is not typed. */
  readonly dropped: number;
}

/** Lays pasted cells over a grid from one cell on, right and down. The given values are left as they are. */
export function pasteInto(
  values: GridValues,
  shape: GridShape,
  at: CellPlace,
  cells: readonly (readonly string[])[]
): Pasted {
  const next: Record<string, Record<string, string>> = {};
  for (const [key, row] of Object.entries(values)) next[key] = { ...row };
  let filled = 0;
  let dropped = 0;
  cells.forEach((line, down) => {
    line.forEach((text, across) => {
      const row = shape.rows[at.row + down];
      const column = shape.columns[at.column + across];
      if (row === undefined || column === undefined || column.readonly) {
        if (text !== '') dropped += 1;
        return;
      }
      (next[row] ??= {})[column.key] = text;
      filled += 1;
    });
  });
  return { values: next, filled, dropped };
}

export interface KeyPress {
  readonly key: string;
  readonly shift: boolean;
  /** The caret stands before the first or after the last sign, so that left and right leave the cell. */
  readonly atStart: boolean;
  readonly atEnd: boolean;
}

/**
 * The cell a key leads to, or null when the key stays in its cell (or, with Tab, leaves the grid). Up, down and
 * Enter move in the column, left and right from the edge of the text, Tab through the rows; columns that are not
 * typed are passed over.
 */
export function nextCell(press: KeyPress, at: CellPlace, shape: GridShape): CellPlace | null {
  const vertical = { ArrowUp: -1, ArrowDown: 1, Enter: press.shift ? -1 : 1 }[press.key];
  if (vertical !== undefined) {
    const row = at.row + vertical;
    return row >= 0 && row < shape.rows.length ? { row, column: at.column } : null;
  }
  if (press.key === 'ArrowLeft' && press.atStart) return along(at, shape, -1, false);
  if (press.key === 'ArrowRight' && press.atEnd) return along(at, shape, 1, false);
  if (press.key === 'Tab') return along(at, shape, press.shift ? -1 : 1, true);
  return null;
}

function along(at: CellPlace, shape: GridShape, step: 1 | -1, wraps: boolean): CellPlace | null {
  let { row, column } = at;
  for (;;) {
    column += step;
    if (column < 0 || column >= shape.columns.length) {
      row += step;
      if (!wraps || row < 0 || row >= shape.rows.length) return null;
      column = step === 1 ? 0 : shape.columns.length - 1;
    }
    if (!shape.columns[column]?.readonly) return { row, column };
  }
}
