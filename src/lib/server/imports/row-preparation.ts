import type { NumberColumn } from './column-plan';
import type { CellReader } from './merged-cells';
import { readNumberCell } from './read-cell';
import { cellAt } from './sheet';
import { textOf } from './sheet-mapping';
import type { SheetMapping } from './sheet-mapping';
import { textDate } from './text-date';
import { convert } from './units';

/**
 * @param fromLabel the number that the sample's label gives, for a row that has none of its own
 * @returns null where the number given is none; the problem is reported
 */
export function injectionOf(
  { sheet, plan, decimalOf, problems }: SheetMapping,
  row: number,
  fromLabel: number | null
): number | null {
  if (plan.injection === null) return fromLabel ?? 1;
  const column = plan.injection;
  const cell = cellAt(sheet, row, column);
  const expected = 'an injection number (1, 2, 3 …)';
  const context = { sheet: sheet.name, row, column, expected, decimal: decimalOf(column) };
  const number = readNumberCell(cell, context, problems);
  if (number.state === 'missing') return fromLabel ?? 1;
  if (number.state === 'unusable') return null;
  if (
    number.state === 'value' &&
    Number.isInteger(number.value) &&
    number.value >= 1 &&
    number.value <= 32_767
  )
    return number.value;
  problems.error({
    code: 'injection number',
    sheet: sheet.name,
    row,
    column,
    found: `“${textOf(cell)}”`,
    expected,
    what: `“${textOf(cell)}” is no injection number.`,
    fix: 'Number the injections of one vial 1, 2, 3, or leave the cell empty if there is one.'
  });
  return null;
}

export interface Preparation {
  readonly finalVolumeMl: number | null;
  readonly dilution: number | null;
  readonly aliquotShare: number | null;
  readonly acquiredAt: string | null;
  /** To be held against the record. */
  readonly sampleVolumeMl: number | null;
  readonly sampleMassG: number | null;
  /** The final volume is in the file but cannot be used, which has been said. */
  readonly isVolumeFaulty: boolean;
}

export function preparationOf(mapping: SheetMapping, merged: CellReader, row: number): Preparation {
  const { plan } = mapping;
  const within = (
    from: NumberColumn | null,
    expected: string,
    code: BoundCode,
    isWithin: (value: number) => boolean
  ): number | null | 'faulty' => bounded(mapping, merged, row, { from, expected, code, isWithin });
  const volume = within(plan.finalVolume, 'a final volume above zero', 'not positive', (value) => value > 0);
  const dilution = within(
    plan.dilution,
    'a dilution of 1 or more',
    'dilution below one',
    (value) => value >= 1
  );
  const share = within(
    plan.aliquotShare,
    'a share above 0 and up to 1',
    'share outside range',
    (value) => value > 0 && value <= 1
  );
  const sampleVolume = within(
    plan.sampleVolume,
    'a sample volume above zero',
    'not positive',
    (value) => value > 0
  );
  const sampleMass = within(
    plan.sampleMass,
    'a sample mass above zero',
    'not positive',
    (value) => value > 0
  );
  return {
    sampleVolumeMl: sampleVolume === 'faulty' ? null : sampleVolume,
    sampleMassG: sampleMass === 'faulty' ? null : sampleMass,
    finalVolumeMl: volume === 'faulty' ? null : volume,
    isVolumeFaulty: volume === 'faulty',
    dilution: dilution === 'faulty' ? null : dilution,
    aliquotShare: share === 'faulty' ? null : share,
    acquiredAt: acquiredAtOf(mapping, row)
  };
}

type BoundCode = 'not positive' | 'dilution below one' | 'share outside range';

interface Bound {
  readonly from: NumberColumn | null;
  readonly expected: string;
  readonly code: BoundCode;
  readonly isWithin: (value: number) => boolean;
}

/** @returns null for an empty cell, 'faulty' for one whose problem has been reported */
function bounded(
  { sheet, decimalOf, problems }: SheetMapping,
  merged: CellReader,
  row: number,
  { from, expected, code, isWithin }: Bound
): number | null | 'faulty' {
  if (!from) return null;
  const { column } = from;
  const cell = merged(row, column);
  const context = { sheet: sheet.name, row, column, expected, decimal: decimalOf(column) };
  const number = readNumberCell(cell, context, problems);
  if (number.state === 'missing') return null;
  if (number.state === 'unusable') return 'faulty';
  const value = number.state === 'value' ? convert(number.value, from.factor) : null;
  if (value !== null && isWithin(value)) return value;
  problems.error({
    code: value === null ? 'not a number' : code,
    sheet: sheet.name,
    row,
    column,
    expected,
    found: `“${textOf(cell)}”`,
    what: `“${textOf(cell)}” stands where ${expected} belongs.`,
    fix: 'Correct the cell, or leave it empty.'
  });
  return 'faulty';
}

function acquiredAtOf({ sheet, plan, dateOrder, problems }: SheetMapping, row: number): string | null {
  if (plan.acquiredAt === null) return null;
  const cell = cellAt(sheet, row, plan.acquiredAt);
  if (!cell || textOf(cell) === '') return null;
  if (cell.kind === 'date') return cell.raw;
  const iso = cell.kind === 'text' ? textDate(cell.value, dateOrder) : null;
  if (iso !== null) return iso;
  problems.oncePer('column', 'question', {
    code: 'date not understood',
    sheet: sheet.name,
    row,
    column: plan.acquiredAt,
    found: `“${textOf(cell)}”`,
    expected: 'a date cell, or a text such as 2026-03-04 16:20',
    what: `“${textOf(cell)}” is not read as a date, since day and month could be swapped. Store these rows without it?`,
    fix: 'Confirm to leave the time out, or write it as year-month-day.'
  });
  return null;
}
