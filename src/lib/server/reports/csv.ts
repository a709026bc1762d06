/** One cell of a table of text; null leaves it empty. */
export type CsvCell = string | number | null;

/**
 * A table as CSV by RFC 4180: commas, CRLF, quotes where needed, figures with a point and unrounded. Begins with a byte order mark,
 * so that spreadsheets read it as UTF-8. A text that a spreadsheet would run as a formula is kept from it by an apostrophe.
 */
export function csvText(heads: readonly string[], rows: readonly (readonly CsvCell[])[]): string {
  return `\uFEFF${[heads, ...rows].map((row) => row.map(cellText).join(',')).join('\r\n')}\r\n`;
}

function cellText(cell: CsvCell): string {
  if (cell === null) return '';
  if (typeof cell === 'number') return String(cell);
  const safe = /^[=+\-@\t\r]/.test(cell) ? `'${cell}` : cell;
  return /[",\r\n]/.test(safe) ? `"${safe.replaceAll('"', '""')}"` : safe;
}
