import type { NumberColumn, QualifierColumns } from './column-plan';
import { parseValue } from './parse-value';
import { cellAt } from './sheet';
import { textOf } from './sheet-mapping';
import type { SheetMapping } from './sheet-mapping';
import type { Qualifiers } from './types';
import { convert, unchanged } from './units';

/** What the columns beside a value tell of its peak; null where they say nothing of it. */
export function qualifiersOf(
  mapping: SheetMapping,
  row: number,
  columns: QualifierColumns | null
): Qualifiers | null {
  if (!columns) return null;
  const qualifiers: Qualifiers = {
    retentionTimeMin: numberOf(mapping, row, columns.retentionTime, 'a retention time'),
    ionRatio: numberOf(mapping, row, columns.ionRatio, 'an ion ratio'),
    signalToNoise: numberOf(
      mapping,
      row,
      columns.signalToNoise === null ? null : { column: columns.signalToNoise, factor: unchanged },
      'a signal to noise ratio'
    ),
    manualIntegration: manualIntegrationOf(mapping, row, columns)
  };
  return Object.values(qualifiers).some((each) => each !== null) ? qualifiers : null;
}

/** They judge no figure: one that cannot be read is asked about once a column, and stored without it. */
function numberOf(
  { sheet, decimalOf, problems }: SheetMapping,
  row: number,
  from: NumberColumn | null,
  expected: string
): number | null {
  if (!from) return null;
  const cell = cellAt(sheet, row, from.column);
  const parsed = parseValue(cell, decimalOf(from.column));
  if (parsed.state === 'value' && parsed.value >= 0) return convert(parsed.value, from.factor);
  if (parsed.state === 'missing' || parsed.state === 'not detected') return null;
  problems.oncePer(`column ${from.column}`, 'question', {
    code: 'qualifier not read',
    sheet: sheet.name,
    row,
    column: from.column,
    found: `“${textOf(cell)}”`,
    expected,
    what: `“${textOf(cell)}” is not read as ${expected}. Store the result without it?`,
    fix: 'Confirm to leave it out, or correct the cell.'
  });
  return null;
}

const notManual = /^(?:no|n|false|0|auto|automatic|a|-|–|—|none|n\/a)$/i;
const manual = /^(?:yes|y|true|1|x|✓|✔|m|manual|manually|hand|by hand)$/i;
const manualWithCause = /^(?:yes|manual|manually|by hand|m)\s*[:;,(–—-]\s*(.+?)\)?$/iu;

/** A cause without a mark is a mark. */
function manualIntegrationOf(
  { sheet, problems }: SheetMapping,
  row: number,
  { manualIntegration, manualCause }: QualifierColumns
): Qualifiers['manualIntegration'] {
  const textIn = (column: number | null): string =>
    column === null ? '' : textOf(cellAt(sheet, row, column));
  const mark = textIn(manualIntegration);
  const given = textIn(manualCause);
  const cause = given === '' || notManual.test(given) ? null : given.slice(0, 500);
  if (mark === '') return cause === null ? null : { cause };
  if (notManual.test(mark)) return null;
  if (manual.test(mark)) return { cause };
  const within = manualWithCause.exec(mark)?.[1]?.trim().slice(0, 500);
  if (within !== undefined) return { cause: cause ?? within };
  problems.oncePer(`manual ${manualIntegration}`, 'question', {
    code: 'qualifier not read',
    sheet: sheet.name,
    row,
    column: manualIntegration ?? 0,
    found: `“${mark}”`,
    expected: 'yes or no, or “manual” with its cause',
    what: `“${mark}” does not say whether this peak was integrated by hand. Store the result without a mark?`,
    fix: 'Confirm to leave the mark out, or write yes or no, and the cause in a column of its own.'
  });
  return null;
}
