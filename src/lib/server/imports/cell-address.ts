/**
 * The address of a cell as spreadsheets write it.
 *
 * @param row zero-based
 * @param column zero-based
 * @returns for (17, 5): 'F18'
 */
export function cellAddress(row: number, column: number): string {
  return `${columnLetters(column)}${row + 1}`;
}

/** @param column zero-based; 0 is A, 26 is AA */
export function columnLetters(column: number): string {
  let letters = '';
  for (let rest = column + 1; rest > 0; rest = Math.floor((rest - 1) / 26)) {
    letters = String.fromCharCode(65 + ((rest - 1) % 26)) + letters;
  }
  return letters;
}

/** "Columns A and B", or, where a sheet is read turned, "Rows 1 and 2". */
export function linesInWords(isTurned: boolean, first: number, second: number): string {
  return isTurned
    ? `Rows ${first + 1} and ${second + 1}`
    : `Columns ${columnLetters(first)} and ${columnLetters(second)}`;
}

/** @returns zero-based row and column, or null for what is no address */
export function parseAddress(address: string): { readonly row: number; readonly column: number } | null {
  let column = 0;
  let position = 0;
  for (; position < address.length; position++) {
    const letter = address.charCodeAt(position) & 0xdf;
    if (letter < 65 || letter > 90) break;
    column = column * 26 + (letter - 64);
  }
  if (position === 0 || position > 3) return null;
  let row = 0;
  const firstDigit = position;
  for (; position < address.length; position++) {
    const digit = address.charCodeAt(position) - 48;
    if (digit < 0 || digit > 9) return null;
    row = row * 10 + digit;
  }
  return position === firstDigit || row === 0 ? null : { row: row - 1, column: column - 1 };
}
