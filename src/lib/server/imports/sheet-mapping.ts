import type { ColumnPlan } from './column-plan';
import type { NameMatcher } from './name-matcher';
import type { PlaceFinder } from './place-finder';
import type { ProblemList } from './problems';
import type { Cell, DecimalMark, Sheet } from './types';

/** What the reading of a sheet's rows works with. */
export interface SheetMapping {
  readonly sheet: Sheet;
  readonly plan: ColumnPlan;
  readonly headerRow: number;
  readonly analytes: NameMatcher<string>;
  readonly places: PlaceFinder;
  readonly decimalOf: (column: number) => DecimalMark | null;
  /** Whether a panel entry is calibrated with an internal standard. */
  readonly hasInternalStandard: (panelEntryId: string) => boolean;
  readonly problems: ProblemList;
}

export function textOf(cell: Cell | null): string {
  return cell === null ? '' : cell.raw.trim();
}

export function isBlank(cell: Cell | null): boolean {
  return cell === null || (cell.kind === 'text' && cell.value.trim() === '');
}
