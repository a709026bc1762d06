import type { ColumnMap } from '../../schemas/column-map';
import type { ReadingLimits } from './limits';
import type { CellMend } from './mends';
import type { RefusalCode } from './refusal';
import type { Expectation, FileKind, MappedImport, MappedRecord, Problem, Sheet, Workbook } from './types';

export interface ChildRequest {
  readonly bytes: Uint8Array;
  readonly limits: ReadingLimits;
  /** null: read only. */
  readonly expectation: Expectation | null;
  readonly maps: ReadingMaps;
}

/** What a file is read by, and the cells that a person read otherwise. */
export interface ReadingMaps {
  /** The map that somebody made or changed for this file; null: the one recognised. */
  readonly given: ColumnMap | null;
  /** Maps kept by the lab: without a given one the first whose layout is in the file is applied to what is recognised. */
  readonly saved: readonly ColumnMap[];
  readonly mends: readonly CellMend[];
}

/**
 * What the child answers, in pieces of a size that keeps the receiving process able to answer others between them.
 * The texts of a workbook are sent once, not with every sheet.
 */
export type ChildMessage =
  | { readonly type: 'ready' }
  | { readonly type: 'texts'; readonly texts: readonly string[] }
  | { readonly type: 'sheet'; readonly sheet: Omit<Sheet, 'texts'> }
  | { readonly type: 'records'; readonly records: readonly MappedRecord[] }
  | { readonly type: 'problems'; readonly problems: readonly Problem[] }
  | {
      readonly type: 'done';
      readonly kind: FileKind;
      readonly encoding: string | null;
      readonly separator: Workbook['separator'];
      readonly mapped: Omit<MappedImport, 'records' | 'problems'> | null;
    }
  | { readonly type: 'refused'; readonly code: RefusalCode; readonly message: string };

export const piece = { texts: 20_000, records: 2_000, problems: 2_000 } as const;

export function inPieces<T>(list: readonly T[], size: number): readonly (readonly T[])[] {
  return Array.from({ length: Math.ceil(list.length / size) }, (_, index) =>
    list.slice(index * size, (index + 1) * size)
  );
}
