import type { ReadingMaps } from './child-messages';
import { applySavedMap, recogniseColumnMap } from './column-map';
import { readByColumnMap } from './read-by-column-map';
import type { Expectation, MappedImport, Workbook } from './types';

const recognisedOnly: ReadingMaps = { given: null, saved: [] };

/**
 * Reads measurements out of a workbook: by the map that was given for it, else by the first saved one whose layout it has, else by
 * the one that we recognise in it (see `recogniseColumnMap`, `applySavedMap` and `readByColumnMap`). The answer's `map` is
 * what was read by.
 */
export function mapRecords(
  workbook: Workbook,
  expectation: Expectation,
  { given, saved }: ReadingMaps = recognisedOnly
): MappedImport {
  if (given) return readByColumnMap(workbook, given, expectation);
  const recognised = recogniseColumnMap(workbook, expectation);
  const applied = saved.map((map) => applySavedMap(map, workbook, recognised)).find((map) => map !== null);
  return readByColumnMap(workbook, applied ?? recognised, expectation);
}
