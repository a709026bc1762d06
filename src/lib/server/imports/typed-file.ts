import type { ReportedBasis } from '../../domain/vocabulary';
import type { TypedCells } from '../../domain/typed-cells';
import type { TypingColumn, TypingRow } from '../../views/typing';
import { columnLetters } from './cell-address';

/** What was typed, as the bytes that are kept of it, and the way back from a cell of these bytes to the grid. */
export interface TypedFile {
  readonly bytes: Buffer;
  /** By cell ("F18"): row key and column key joined by a colon. */
  readonly places: ReadonlyMap<string, string>;
}

const unitsOf: Readonly<Record<ReportedBasis, string>> = {
  area: 'area',
  vial: '(ng/mL)',
  ng: '(ng)',
  ng_per_l: '(ng/L)'
};

/** By RFC 4180, the text as it was typed: what is kept must be what the person wrote. */
const written = (text: string): string =>
  /[",;\t\r\n]/.test(text) ? `"${text.replaceAll('"', '""')}"` : text;

/**
 * What was typed as a CSV table (UTF-8), one row for each injection, the analytes across: rows and analyte columns without a typed cell
 * are left out, since nobody meant them to be missing.
 *
 * @returns null where no value was typed at all
 */
export function typedFile(
  rows: readonly TypingRow[],
  columns: readonly TypingColumn[],
  cells: TypedCells,
  basis: ReportedBasis
): TypedFile | null {
  const textOf = (row: TypingRow, column: TypingColumn): string => cells[row.key]?.[column.key] ?? '';
  const preparation = columns.filter(({ kind }) => kind === 'preparation');
  const values = columns.filter(
    (column) => column.kind !== 'preparation' && rows.some((row) => textOf(row, column) !== '')
  );
  const typed = rows.filter((row) =>
    [...preparation, ...values].some((column) => textOf(row, column) !== '')
  );
  if (values.length === 0 || typed.length === 0) return null;

  const heads = [
    'Sample',
    'Fraction',
    'Injection',
    ...preparation.map(({ label, unit }) => (unit === null ? label : `${label} (${unit})`)),
    ...values.map(({ label, kind }) => `${label} ${kind === 'internal standard' ? 'area' : unitsOf[basis]}`)
  ];
  const places = new Map<string, string>();
  const lines = typed.map((row, index) => {
    const own = [...preparation, ...values].map((column, place) => {
      places.set(`${columnLetters(place + 3)}${index + 2}`, `${row.key}:${column.key}`);
      return textOf(row, column);
    });
    return [row.sample, row.fraction ?? '', String(row.injection), ...own];
  });
  const text = [heads, ...lines].map((line) => line.map(written).join(',')).join('\r\n');
  return { bytes: Buffer.from(`\uFEFF${text}\r\n`, 'utf8'), places };
}
