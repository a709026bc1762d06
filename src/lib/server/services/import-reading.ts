import pLimit from 'p-limit';
import type { Study } from '../db/models/study';
import { mapInChild } from '../imports/read-in-child';
import { Refusal } from '../imports/refusal';
import type { Expectation, MappedImport, Workbook } from '../imports/types';
import { bytesOf } from './imports';
import { loadExpectation, nothingDeclared, type Declared } from './import-expectation';

/** A reading child may take a few hundred MB: no more than this many at once in one process; others wait their turn. */
const turns = pLimit(2);

export type ImportReading =
  | { readonly kind: 'refused'; readonly sentence: string }
  | {
      readonly kind: 'read';
      readonly workbook: Workbook;
      readonly expectation: Expectation;
      readonly mapped: MappedImport;
    };

/**
 * Reads a kept file against what the study offers now. The bytes are read in a process of their own,
 * which can be ended; nothing is written.
 */
export async function readKeptFile(
  study: Pick<Study, 'id' | 'labId'>,
  kept: Readonly<{ id: string; declared: unknown }>
): Promise<ImportReading> {
  const declared: Declared = { ...nothingDeclared, ...(kept.declared as Partial<Declared>) };
  const [bytes, expectation] = await Promise.all([
    bytesOf(kept.id),
    loadExpectation({ labId: study.labId, studyId: study.id }, declared)
  ]);
  try {
    return { kind: 'read', expectation, ...(await turns(() => mapInChild(bytes, expectation))) };
  } catch (error) {
    if (error instanceof Refusal) return { kind: 'refused', sentence: error.message };
    throw error;
  }
}
