/** A column of a table: what it is called, its unit (in the head, never in the cells), what a row shows. */
export interface TableColumn<Row> {
  readonly key: string;
  readonly label: string;
  readonly unit?: string;
  /** Figures stand right, aligned on the decimal point. */
  readonly numeric?: boolean;
  /** The text of the cell, already rounded for the screen; null shows a dash. */
  readonly value: (row: Row) => string | number | null;
  /** Makes the cell a link. */
  readonly href?: (row: Row) => string | undefined;
  /** Heads its row for a screen reader, and stays in sight when a narrow screen scrolls sideways. */
  readonly heads?: boolean;
  /** Where the head's sort link leads, and whether the rows are in that order now. */
  readonly sort?: { readonly href: string; readonly state: 'ascending' | 'descending' | 'none' };
}

/** Digits after the decimal point (or comma) of a figure as written; 0 for anything else. */
export function decimalsOf(text: string): number {
  return /^[<>≤≥±+−-]?\s?[\d\s ]*[.,](\d+)\s*$/.exec(text)?.[1]?.length ?? 0;
}

/** The largest number of decimals in a column, which is what the other cells make room for. */
export function columnDecimals<Row>(column: TableColumn<Row>, rows: readonly Row[]): number {
  return rows.reduce((most, row) => Math.max(most, decimalsOf(String(column.value(row) ?? ''))), 0);
}

/**
 * Room to leave at the right of a figure so that decimal points stand under each other: one digit for each
 * decimal it lacks, and a point's width when it has none. CSS length; digits are tabular, so 1ch is one digit.
 */
export function decimalRoom(text: string, decimals: number): string | undefined {
  const own = decimalsOf(text);
  if (own === decimals) return undefined;
  return own === 0 ? `calc(${decimals}ch + 0.25em)` : `${decimals - own}ch`;
}

const cellText = (value: string | number | null): string =>
  String(value ?? '')
    .replace(/[\t\r\n]+/g, ' ')
    .trim();

/** The table as tab-separated text with its heads ("Recovery (%)"), ready for a spreadsheet. */
export function tableAsText<Row>(columns: readonly TableColumn<Row>[], rows: readonly Row[]): string {
  const head = columns.map(({ label, unit }) => (unit ? `${label} (${unit})` : label)).join('\t');
  return [head, ...rows.map((row) => columns.map((c) => cellText(c.value(row))).join('\t'))].join('\n');
}
