import type { MeasurementState, ReportedBasis } from '../../domain/vocabulary';
import { cellAddress } from './cell-address';
import type { ValueColumn } from './column-plan';
import { mergeAwareReader } from './merged-cells';
import type { CellReader } from './merged-cells';
import { readNumberCell } from './read-cell';
import { analyteOf } from './row-analyte';
import { placeOf } from './row-place';
import type { RowPlace } from './row-place';
import { injectionOf, preparationOf } from './row-preparation';
import type { Preparation } from './row-preparation';
import { cellAt } from './sheet';
import { isBlank, textOf } from './sheet-mapping';
import type { SheetMapping } from './sheet-mapping';
import { qualifiersOf } from './row-qualifiers';
import type { Place, Qualifiers } from './types';
import { convert } from './units';
import { expectedWords } from './value-words';

/** A record before the checks that look at several rows at once. */
export interface DraftRecord {
  readonly sheet: string;
  /** Of the sheet as it is, turned or not. */
  readonly row: number;
  readonly column: number;
  /** What was read as one row: the row, or the column of a sheet that is read turned. */
  readonly line: number;
  readonly place: Place;
  /** How messages name it: "S4, Elution 1". */
  readonly placeName: string;
  readonly panelEntryId: string;
  readonly injection: number;
  readonly basis: ReportedBasis;
  readonly state: MeasurementState;
  readonly value: number | null;
  readonly limit: number | null;
  readonly rawText: string;
  /** Where problems with other properties are shown; null: the sheet has no such column. */
  readonly internalCell: CellPlace | null;
  readonly volumeCell: CellPlace | null;
  internalArea: number | null;
  /** What is in the file but cannot be used, so that it is not called missing as well. */
  readonly isInternalAreaFaulty: boolean;
  readonly isVolumeFaulty: boolean;
  finalVolumeMl: number | null;
  dilution: number | null;
  aliquotShare: number | null;
  readonly sampleVolumeMl: number | null;
  readonly sampleMassG: number | null;
  readonly acquiredAt: string | null;
  readonly qualifiers: Qualifiers | null;
}

export interface CellPlace {
  readonly row: number;
  readonly column: number;
}

/** Turns the rows of a table into records, one for each row and value column, and reports what is in the way. */
export function mapSheet(mapping: SheetMapping): readonly DraftRecord[] {
  const { sheet, plan, from, to, leftOut } = mapping;
  const merged = mergeAwareReader(sheet);
  const drafts: DraftRecord[] = [];
  for (let at = from; at < to; at++) {
    const row = sheet.rowNumbers[at] ?? 0;
    if (leftOut.has(row) || isBlankRow(mapping, merged, row)) continue;
    const place = placeOf(mapping, merged, row);
    if (place === 'left out') continue;
    const injection = injectionOf(mapping, row, place?.injection ?? null);
    const preparation = preparationOf(mapping, merged, row);
    const dilution = preparation.dilution ?? place?.dilution ?? null;
    for (const value of plan.values) {
      const panelEntryId = value.analyte ?? analyteOf(mapping, merged, row);
      // Read the cell even where the row found no place, so that all problems come at once.
      const draft = draftOf(mapping, row, value, {
        place,
        panelEntryId,
        injection,
        preparation: { ...preparation, dilution }
      });
      if (draft) drafts.push(draft);
    }
  }
  return drafts;
}

/** Without a label, analyte and numbers a row says nothing (it may hold a remark or a rule). */
function isBlankRow({ plan }: SheetMapping, merged: CellReader, row: number): boolean {
  const filled = (column: number | null): boolean => column !== null && !isBlank(merged(row, column));
  return (
    !filled(plan.sample) &&
    !filled(plan.analyte) &&
    !filled(plan.cas) &&
    !plan.values.some(({ column, internalArea }) => filled(column) || filled(internalArea))
  );
}

interface RowFacts {
  readonly place: RowPlace | null;
  readonly panelEntryId: string | null;
  readonly injection: number | null;
  readonly preparation: Preparation;
}

function draftOf(
  mapping: SheetMapping,
  row: number,
  value: ValueColumn,
  facts: RowFacts
): DraftRecord | null {
  const { sheet, plan, isTurned, decimalOf, values, problems } = mapping;
  const cell = cellAt(sheet, row, value.column);
  const expected = expectedWords[value.basis];
  const context = {
    sheet: sheet.name,
    row,
    column: value.column,
    expected,
    decimal: decimalOf(value.column)
  };
  const number = readNumberCell(cell, context, problems);
  const inSheet = (line: number): CellPlace =>
    isTurned ? { row: line, column: row } : { row, column: line };
  const own = inSheet(value.column);
  values.add(cell, number, () => ({ sheet: sheet.name, cell: cellAddress(own.row, own.column) }));
  const { place, panelEntryId, injection, preparation } = facts;
  const internalArea = internalAreaOf(mapping, row, value, panelEntryId);
  if (number.state === 'unusable' || !place || panelEntryId === null || injection === null) return null;
  const amount = number.state === 'value' ? convert(number.value, value.factor) : null;
  if (amount !== null && !checkSign(mapping, row, value, amount)) return null;
  const isAbove = number.state === 'above';
  const stated = number.state === 'below' || isAbove ? number.limit : null;
  const limit = stated === null ? null : convert(stated, value.factor);
  return {
    sheet: sheet.name,
    ...own,
    line: row,
    place: place.place,
    placeName: place.name,
    panelEntryId,
    injection,
    basis: value.basis,
    state: number.state,
    value: amount,
    limit: limit ?? (isLow(number.state) ? limitOf(mapping, row, value) : null),
    rawText: cell?.raw ?? '',
    internalCell: value.internalArea === null ? null : inSheet(value.internalArea),
    volumeCell: plan.finalVolume === null ? null : inSheet(plan.finalVolume.column),
    internalArea: internalArea === 'faulty' ? null : internalArea,
    isInternalAreaFaulty: internalArea === 'faulty',
    ...preparation,
    qualifiers: qualifiersOf(mapping, row, value.qualifiers)
  };
}

function isLow(state: MeasurementState): boolean {
  return state === 'not detected' || state === 'below';
}

/** The limit that stands in a column of its own, for a cell that names none. */
function limitOf(
  { sheet, decimalOf, problems }: SheetMapping,
  row: number,
  value: ValueColumn
): number | null {
  if (!value.limit) return null;
  const { column, factor } = value.limit;
  const expected = 'a limit above zero';
  const cell = cellAt(sheet, row, column);
  const context = { sheet: sheet.name, row, column, expected, decimal: decimalOf(column) };
  const number = readNumberCell(cell, context, problems);
  if (number.state === 'value' && number.value > 0) return convert(number.value, factor);
  if (number.state === 'below' && number.limit !== null) return convert(number.limit, factor);
  if (number.state !== 'missing' && number.state !== 'unusable') {
    problems.error({
      code: 'not positive',
      sheet: sheet.name,
      row,
      column,
      found: `“${textOf(cell)}”`,
      expected,
      what: `“${textOf(cell)}” stands where ${expected} belongs.`,
      fix: 'Correct the limit, or leave the cell empty.'
    });
  }
  return null;
}

function checkSign(
  { sheet, problems }: SheetMapping,
  row: number,
  value: ValueColumn,
  amount: number
): boolean {
  const at = {
    sheet: sheet.name,
    row,
    column: value.column,
    found: String(amount),
    expected: expectedWords[value.basis]
  };
  if (amount < 0 && value.basis === 'area') {
    problems.error({
      code: 'negative',
      ...at,
      what: `The peak area ${amount} is below zero.`,
      fix: 'Integrate the peak again, or write ND if there is none.'
    });
    return false;
  }
  if (amount < 0) {
    problems.question({
      code: 'negative',
      ...at,
      what: `${amount} is below zero. Is this what was calculated, and not a slip?`,
      fix: 'Confirm to store it as it is, or write ND or the limit (<x) instead.'
    });
  }
  if (amount === 0 && value.basis === 'area') {
    problems.oncePer('zero', 'note', {
      code: 'zero area',
      ...at,
      what: 'This area is exactly 0. It is stored as the number zero, which is not the same as not detected.',
      fix: 'Write ND where no peak was found, so that its limit is taken into account.'
    });
  }
  return true;
}

/** @returns null for an empty cell, 'faulty' for one whose problem has been reported */
function internalAreaOf(
  { sheet, decimalOf, hasInternalStandard, problems }: SheetMapping,
  row: number,
  value: ValueColumn,
  panelEntryId: string | null
): number | null | 'faulty' {
  const column = value.internalArea;
  if (column === null) return null;
  const cell = cellAt(sheet, row, column);
  const expected = 'the peak area of the internal standard';
  const number = readNumberCell(
    cell,
    { sheet: sheet.name, row, column, expected, decimal: decimalOf(column) },
    problems
  );
  if (number.state === 'missing') return null;
  if (number.state === 'unusable') return 'faulty';
  if (number.state === 'value' && number.value > 0) return number.value;
  // Exports fill the column with zeros where no standard is used.
  if (panelEntryId !== null && !hasInternalStandard(panelEntryId)) return null;
  problems.error({
    code: 'not positive',
    sheet: sheet.name,
    row,
    column,
    found: `“${textOf(cell)}”`,
    expected: `${expected}, above zero`,
    what: `“${textOf(cell)}” cannot be divided by: ${expected} has to be above zero.`,
    fix: 'Correct the area. An injection without its internal standard has to be left out or repeated.'
  });
  return 'faulty';
}
