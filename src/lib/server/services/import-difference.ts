import type { MeasurementState } from '../../domain/vocabulary';
import type { DifferenceView } from '../../views/imports';
import {
  readCalibrationMeasurements,
  readExperimentMeasurements,
  type CountingMeasurement
} from '../db/measurement-read';
import { Import } from '../db/models/import';
import { PanelEntry } from '../db/models/panel-entry';
import type { Study } from '../db/models/study';
import { cellAddress } from '../imports/cell-address';
import type { Expectation, MappedRecord } from '../imports/types';
import { placeKey } from './import-coverage';

/** How many changed, gone and added values one page shows. */
const shown = 200;

interface Value {
  readonly state: MeasurementState;
  readonly reported: number | null;
  readonly limit: number | null;
  readonly internalArea: number | null;
  readonly injection: number;
  readonly importId: string;
  readonly cell: string;
}

interface Change {
  readonly kind: 'changed' | 'added' | 'gone';
  readonly place: string;
  readonly entryId: string;
  readonly before: readonly Value[];
  readonly after: readonly Value[];
}

/** Injections in their order: a value is another when any figure of any of them is. */
function text(values: readonly Value[]): string {
  return JSON.stringify(
    [...values]
      .sort((one, other) => one.injection - other.injection)
      .map(({ state, reported, limit, internalArea }) => [state, reported, limit, internalArea])
  );
}

function grouped<Item>(
  items: Iterable<Item>,
  keyOf: (item: Item) => string | null,
  valueOf: (item: Item) => Value
): Map<string, Value[]> {
  const groups = new Map<string, Value[]>();
  for (const item of items) {
    const key = keyOf(item);
    if (key === null) continue;
    const own = groups.get(key);
    if (own) own.push(valueOf(item));
    else groups.set(key, [valueOf(item)]);
  }
  return groups;
}

const onRecord = (row: CountingMeasurement<{ readonly number: number }>): Value => ({
  state: row.state,
  reported: row.reported,
  limit: row.limitValue,
  internalArea: row.internalArea,
  injection: row.injection.number,
  importId: row.importId,
  cell: cellAddress(row.sheetRow - 1, row.sheetColumn - 1)
});

const inFile = (record: MappedRecord): Value => ({
  state: record.state,
  reported: record.reported.value,
  limit: record.limit,
  internalArea: record.reported.internalArea,
  injection: record.injection,
  importId: '',
  cell: `${record.sheet}, ${record.cell}`
});

/** A check is run many times under one label: each run is a value of its own. */
const placeOf = (record: MappedRecord): string | null =>
  record.place.kind === 'check' ? null : placeKey(record);

/**
 * What a file would change of the values that count now: changed, added, and gone, the last being values of the files that it covers
 * for which it holds nothing. Calibration levels count, checks do not.
 *
 * @returns null where it covers nothing
 */
export async function importDifference(
  study: Pick<Study, 'id' | 'labId'>,
  records: readonly MappedRecord[],
  expectation: Expectation
): Promise<DifferenceView | null> {
  const where = { labId: study.labId, studyId: study.id };
  const experimentIds = new Set<string>();
  const setIds = new Set<string>();
  for (const { place } of records) {
    if (place.kind === 'extract') experimentIds.add(place.experimentId);
    if (place.kind === 'level') setIds.add(place.calibrationSetId);
  }
  const entries = await PanelEntry.findAll({ where, attributes: ['id', 'analyteId'] });
  const entryOf = new Map(entries.map(({ id, analyteId }) => [analyteId, id]));
  const key = (place: string, entryId: string | undefined): string | null =>
    entryId === undefined ? null : `${place}|${entryId}`;
  const before = grouped(
    await readExperimentMeasurements({ ...where, experimentIds: [...experimentIds] }),
    ({ injection: { extract }, analyteId }) =>
      key(`${extract.replicateId} ${extract.fractionId ?? ''}`, entryOf.get(analyteId)),
    onRecord
  );
  for (const calibrationSetId of setIds) {
    const levels = grouped(
      await readCalibrationMeasurements({ ...where, calibrationSetId }),
      ({ injection, analyteId }) => key(injection.levelId, entryOf.get(analyteId)),
      onRecord
    );
    for (const [place, values] of levels) before.set(place, values);
  }
  const after = grouped(
    records,
    (record) => {
      const place = placeOf(record);
      return place === null ? null : key(place, record.panelEntryId);
    },
    inFile
  );

  const covered = new Set(
    [...before].flatMap(([place, values]) => (after.has(place) ? values.map(({ importId }) => importId) : []))
  );
  if (covered.size === 0) return null;
  const changes: Change[] = [];
  let same = 0;
  for (const [at, values] of after) {
    const known = before.get(at) ?? [];
    const [place = '', entryId = ''] = at.split('|');
    if (known.length === 0) changes.push({ kind: 'added', place, entryId, before: [], after: values });
    else if (text(known) === text(values)) same += 1;
    else changes.push({ kind: 'changed', place, entryId, before: known, after: values });
  }
  for (const [at, values] of before) {
    const [place = '', entryId = ''] = at.split('|');
    if (!after.has(at) && values.some(({ importId }) => covered.has(importId)))
      changes.push({ kind: 'gone', place, entryId, before: values, after: [] });
  }
  return differenceView(changes, same, { expectation, covered, study: where });
}

async function differenceView(
  changes: readonly Change[],
  same: number,
  of: Readonly<{
    expectation: Expectation;
    covered: ReadonlySet<string>;
    study: { readonly labId: string; readonly studyId: string };
  }>
): Promise<DifferenceView> {
  const files = await Import.findAll({
    where: { ...of.study, id: [...of.covered] },
    attributes: ['id', 'fileName'],
    order: [['storedOrder', 'ASC']]
  });
  const names = placeNames(of.expectation);
  const analytes = new Map(of.expectation.panel.map(({ id, name }) => [id, name]));
  const fileOf = new Map(files.map(({ id, fileName }) => [id, fileName]));
  const count = (kind: Change['kind']): number => changes.filter((change) => change.kind === kind).length;
  const rank = { changed: 0, gone: 1, added: 2 } as const;
  return {
    changed: count('changed'),
    gone: count('gone'),
    added: count('added'),
    same,
    files: files.map(({ id, fileName }) => ({ id, fileName })),
    rows: [...changes]
      .sort((one, other) => rank[one.kind] - rank[other.kind])
      .slice(0, shown)
      .map((change) => ({
        kind: change.kind,
        place: names.get(change.place) ?? '',
        analyte: analytes.get(change.entryId) ?? '',
        before: change.before.map(({ importId, cell, ...value }) => ({
          ...value,
          where: `${fileOf.get(importId) ?? ''}, ${cell}`
        })),
        after: change.after.map(({ importId: _, cell, ...value }) => ({ ...value, where: cell }))
      }))
  };
}

function placeNames({ experiments, calibrationSets }: Expectation): ReadonlyMap<string, string> {
  return new Map([
    ...experiments.flatMap(({ replicates, fractions }) =>
      replicates.flatMap(({ id, label }) => [
        [`${id} `, label] as const,
        ...fractions.map((fraction) => [`${id} ${fraction.id}`, `${label}, ${fraction.name}`] as const)
      ])
    ),
    ...calibrationSets.flatMap(({ name, levels }) =>
      levels.map((level) => [level.id, `${name}, ${level.name}`] as const)
    )
  ]);
}
