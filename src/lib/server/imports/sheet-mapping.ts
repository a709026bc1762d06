import type { CarriedName, ColumnMap, DateOrder } from '../../schemas/column-map';
import type { ColumnPlan } from './column-plan';
import type { LabelReader } from './label-reader';
import type { NameMatcher } from './name-matcher';
import type { NamedText } from './named-text';
import type { PlaceFinder } from './place-finder';
import type { Problems } from './problems';
import type { Cell, DecimalMark, Sheet } from './types';
import type { ValueTally } from './value-tally';

/** What the reading of one table's rows works with. A sheet with the analytes down is turned: its columns are the rows here. */
export interface SheetMapping {
  readonly sheet: Sheet;
  readonly isTurned: boolean;
  readonly plan: ColumnPlan;
  readonly headerRow: number;
  /** Indexes into the sheet's row numbers: the first row, and one past the last. */
  readonly from: number;
  readonly to: number;
  readonly leftOut: ReadonlySet<number>;
  /** What the sheet, a title or the block says for all the rows. */
  readonly carried: Readonly<Partial<Record<CarriedName, NamedText>>>;
  readonly fixed: ColumnMap['fixed'];
  readonly analytes: NameMatcher<string>;
  readonly places: PlaceFinder;
  readonly labels: LabelReader;
  readonly decimalOf: (column: number) => DecimalMark | null;
  readonly dateOrder: DateOrder | null;
  /** Whether a panel entry is calibrated with an internal standard. */
  readonly hasInternalStandard: (panelEntryId: string) => boolean;
  readonly values: ValueTally;
  /** Named by the rows and columns of `sheet`, turned or not. */
  readonly problems: Problems;
}

export function textOf(cell: Cell | null): string {
  return cell === null ? '' : cell.raw.trim();
}

export function isBlank(cell: Cell | null): boolean {
  return cell === null || (cell.kind === 'text' && cell.value.trim() === '');
}

/** Where a carried name stands, for a problem with it; in a row it is the cell given. */
export function placeOfName(
  carried: NamedText | undefined,
  row: number,
  column: number | null
): { readonly row?: number; readonly column?: number } {
  if (column !== null) return { row, column };
  if (!carried || carried.row === null || carried.column === null) return {};
  return { row: carried.row, column: carried.column };
}
