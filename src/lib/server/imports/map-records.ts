import type { ReadingMaps } from './child-messages';
import { applySavedMap, recogniseColumnMap } from './column-map';
import { readByColumnMap } from './read-by-column-map';
import type { Expectation, MappedImport, Workbook } from './types';

const recognisedOnly: Pick<ReadingMaps, 'given' | 'saved'> = { given: null, saved: [] };

/**
 * Reads measurements out of a workbook: by the map that was given for it, else by the first saved one whose layout it has, else by
 * the one that we recognise in it (see `recogniseColumnMap`, `applySavedMap` and `readByColumnMap`). The answer's `map` is
 * what was read by.
 */
export function mapRecords(
  workbook: Workbook,
  expectation: Expectation,
  { given, saved }: Pick<ReadingMaps, 'given' | 'saved'> = recognisedOnly
): MappedImport {
  if (given) return readByColumnMap(workbook, given, expectation);
  const recognised = recogniseColumnMap(workbook, expectation);
  const applied = saved.map((map) => applySavedMap(map, workbook, recognised));
  const savedMap = applied.findIndex((map) => map !== null);
  const read = readByColumnMap(workbook, applied[savedMap] ?? recognised, expectation);
  return { ...read, savedMap: savedMap < 0 ? null : savedMap };
}
