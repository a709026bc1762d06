import { createHash } from 'node:crypto';
import { LRUCache } from 'lru-cache';
import pLimit from 'p-limit';
import type { Study } from '../db/models/study';
import type { ReadingMaps } from '../imports/child-messages';
import { mapInChild } from '../imports/read-in-child';
import { Refusal } from '../imports/refusal';
import type { Expectation, MappedImport, Workbook } from '../imports/types';
import { bytesOf } from './imports';
import { keptMapsOf, type KeptMap } from './kept-maps';
import { declaredOf, loadExpectation } from './import-expectation';

/** A reading child may take a few hundred MB: no more than this many at once in one process; others wait their turn. */
const turns = pLimit(2);

type Read = Awaited<ReturnType<typeof mapInChild>>;

/**
 * What was read a moment ago: a person looks at a file page by page and then stores it. The bytes of an import never change,
 * and the key holds all of what else the reading depends on, so that a kept reading is the one a new reading would give.
 */
const recent = new LRUCache<string, Read>({ maxSize: 100_000, sizeCalculation: weightOf, ttl: 10 * 60_000 });

/** In records; ten cells of the sheet weigh about as much as one. */
function weightOf({ workbook, mapped }: Read): number {
  const cells = workbook.sheets.reduce((sum, sheet) => sum + sheet.values.length, 0);
  return 1 + mapped.records.length + Math.ceil(cells / 10);
}

async function readOnce(importId: string, expectation: Expectation, maps: ReadingMaps): Promise<Read> {
  const key = createHash('sha256')
    .update(JSON.stringify([importId, expectation, maps]))
    .digest('hex');
  const known = recent.get(key);
  if (known) return known;
  const bytes = await bytesOf(importId);
  const read = await turns(() => mapInChild(bytes, expectation, { maps }));
  recent.set(key, read);
  return read;
}

export interface FileRead {
  readonly kind: 'read';
  readonly workbook: Workbook;
  readonly expectation: Expectation;
  readonly mapped: MappedImport;
  /** The kept map that applied by itself; null: none. */
  readonly keptMap: KeptMap | null;
}

export type ImportReading = { readonly kind: 'refused'; readonly sentence: string } | FileRead;

/**
 * Reads a kept file against what the study offers now. The bytes are read in a process of their own,
 * which can be ended; nothing is written.
 */
export async function readKeptFile(
  study: Pick<Study, 'id' | 'labId'>,
  kept: Readonly<{ id: string; declared: unknown }>
): Promise<ImportReading> {
  const declared = declaredOf(kept.declared);
  // A map of its own leaves nothing to be recognised.
  const saved = declared.map ? [] : await keptMapsOf(study.labId);
  const maps: ReadingMaps = {
    given: declared.map,
    saved: saved.map(({ map }) => map),
    mends: declared.mends
  };
  const expectation = await loadExpectation({ labId: study.labId, studyId: study.id }, declared);
  try {
    const read = await readOnce(kept.id, expectation, maps);
    const { savedMap } = read.mapped;
    return {
      kind: 'read',
      expectation,
      ...read,
      keptMap: savedMap === null ? null : (saved[savedMap] ?? null)
    };
  } catch (error) {
    if (error instanceof Refusal) return { kind: 'refused', sentence: error.message };
    throw error;
  }
}
