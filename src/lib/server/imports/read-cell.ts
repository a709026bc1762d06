import { parseValue } from './parse-value';
import type { Problems } from './problems';
import type { Cell, DecimalMark } from './types';

/** Where a number is read and what it should be, for the sentences. */
export interface NumberContext {
  readonly sheet: string;
  readonly row: number;
  readonly column: number;
  /** "a peak area", "a final volume (mL)" */
  readonly expected: string;
  readonly decimal: DecimalMark | null;
}

export type ReadNumber =
  | { readonly state: 'value'; readonly value: number }
  | { readonly state: 'not detected' }
  | { readonly state: 'below' | 'above'; readonly limit: number | null }
  | { readonly state: 'missing' }
  | { readonly state: 'unusable' };

const unusable: ReadNumber = { state: 'unusable' };

/**
 * Reads a cell that should hold a number, and reports what it holds instead. A date is read as the number underneath, with a
 * question.
 */
export function readNumberCell(cell: Cell | null, context: NumberContext, problems: Problems): ReadNumber {
  // Nearly all cells end here; the words for problems are not made for them.
  if (cell === null) return { state: 'missing' };
  if (cell.kind === 'number') return { state: 'value', value: cell.value };
  const { sheet, row, column, expected, decimal } = context;
  const parsed = parseValue(cell, decimal);
  const at = { sheet, row, column, expected };
  const found = `“${cell.raw}”`;
  switch (parsed.state) {
    case 'value':
    case 'not detected':
    case 'missing':
      return parsed;
    case 'below':
    case 'above':
      return parsed;
    case 'date':
      problems.question({
        code: 'date in number column',
        ...at,
        found: `the date ${parsed.iso}`,
        what: `This cell shows the date ${parsed.iso} where ${expected} belongs. The number underneath is ${parsed.serial}. Is that the number meant?`,
        fix: 'Confirm to store that number, or type the number again in a cell formatted as a number.'
      });
      return { state: 'value', value: parsed.serial };
    case 'ambiguous':
      problems.oncePer(`column ${column}`, 'question', {
        code: 'ambiguous separator',
        ...at,
        found,
        what: `${found} can be ${parsed.asPoint} (decimal point) or ${parsed.asComma} (decimal comma), and nothing else in this file decides it.`,
        fix: 'Declare which mark parts the decimals in this file.',
        answer: 'declare decimal'
      });
      return unusable;
    case 'contradicts':
      problems.error({
        code: 'not a number',
        ...at,
        found,
        what: `${found} is no number with the decimal ${decimal ?? 'mark'} that this column has.`,
        fix: 'Write the number with the same decimal mark as the others.'
      });
      return unusable;
    case 'slip':
      problems.error({
        code: 'looks like a number',
        ...at,
        found,
        what: `${found} stands where ${expected} belongs. Without ${parsed.slip} it would read ${parsed.mended}. Was that meant?`,
        fix: 'Correct the cell and bring the file again.'
      });
      return unusable;
    case 'unit':
      problems.error({
        code: 'looks like a number',
        ...at,
        found,
        what: `${found} carries a unit in the cell. Here ${expected} belongs, as a number alone.`,
        fix: `Leave ${parsed.number} in the cell and write the unit (${parsed.unit}) into the header.`
      });
      return unusable;
    case 'error':
      problems.error({
        code: 'error cell',
        ...at,
        found: parsed.error,
        what: `A formula failed here (${parsed.error}) where ${expected} belongs. What it should have given cannot be told.`,
        fix: 'Mend the formula, or empty the cell if nothing was measured.'
      });
      return unusable;
    case 'formula':
      problems.error({
        code: 'formula without result',
        ...at,
        found: cell.raw,
        what: 'This formula has no stored result; the file was written by a program that did not calculate it.',
        fix: 'Open the file in a spreadsheet program, save it, and bring it again.'
      });
      return unusable;
    case 'unreadable':
      problems.error({
        code: 'not a number',
        ...at,
        found,
        what: `${found} stands where ${expected} belongs.`,
        fix: 'Write the number, ND for not detected, or leave the cell empty if nothing was measured.'
      });
      return unusable;
  }
}
