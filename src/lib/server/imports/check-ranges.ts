import type { DraftRecord } from './map-sheet';
import type { Problems } from './problems';
import { grouped, injectionKey, medianOf, shortNumber } from './record-keys';
import type { Expectation, PanelExpectation } from './types';

interface Range {
  readonly low: number;
  readonly high: number;
}

/**
 * Asks about results outside of what was calibrated: concentrations in the vial by the levels that the study has, areas by those of
 * the levels in the same file (by the ratio to the internal standard where levels and extract have one).
 */
export function checkCalibratedRange(
  records: readonly DraftRecord[],
  panel: ReadonlyMap<string, PanelExpectation>,
  problems: Problems
): void {
  const responses = grouped(records, (record) =>
    record.place.kind === 'level' && responseOf(record) !== null ? rangeKey(record) : null
  );
  const ranges = new Map<string, Range | null>();
  for (const [key, levels] of responses) ranges.set(key, rangeOf(levels));
  for (const record of records) {
    const entry = panel.get(record.panelEntryId);
    const response = responseOf(record);
    if (!entry || response === null || record.place.kind !== 'extract') continue;
    if (entry.role === 'injection internal standard') continue;
    const isArea = record.basis === 'area';
    const range = isArea ? ranges.get(rangeKey(record)) : record.basis === 'vial' ? entry.levelRange : null;
    if (!range || (response >= range.low && response <= range.high)) continue;
    const isAbove = response > range.high;
    const what = isArea
      ? record.internalArea === null
        ? 'area'
        : 'ratio of areas'
      : 'concentration in the vial';
    const bound = `${shortNumber(isAbove ? range.high : range.low)}${isArea ? '' : ' ng/mL'}`;
    problems.oncePer(`${record.panelEntryId} ${isAbove}`, 'question', {
      code: 'outside calibration range',
      sheet: record.sheet,
      row: record.row,
      column: record.column,
      found: shortNumber(response),
      expected: `${shortNumber(range.low)} to ${shortNumber(range.high)}`,
      what: `${entry.name} of ${record.placeName} is ${isAbove ? 'above its highest' : 'below its lowest'} calibration level: its ${what} is ${shortNumber(response)}, the level’s ${bound}.`,
      fix: isAbove
        ? 'Dilute and inject again, or confirm: the result then rests on a calibration that does not reach so far.'
        : 'Confirm, or write the limit (<x) where the peak is too small to be counted.'
    });
  }
}

function rangeKey(record: DraftRecord): string {
  return `${record.panelEntryId} ${record.internalArea !== null}`;
}

/** What a calibration reads: the area, or its ratio to the internal standard's; of other bases the number itself. */
function responseOf({ state, value, internalArea, basis }: DraftRecord): number | null {
  if (state !== 'value' || value === null) return null;
  return basis === 'area' && internalArea !== null ? value / internalArea : value;
}

/** The least and greatest mean of a level; null of fewer than two levels. */
function rangeOf(levels: readonly DraftRecord[]): Range | null {
  const means = [
    ...grouped(levels, ({ place }) => (place.kind === 'level' ? place.levelId : null)).values()
  ].map((injections) => mean(injections.map((record) => responseOf(record) ?? NaN)));
  return means.length < 2 ? null : { low: Math.min(...means), high: Math.max(...means) };
}

function mean(values: readonly number[]): number {
  return values.reduce((sum, value) => sum + value, 0) / values.length;
}

/** Half to twice the usual area (common practice, no source). */
const internalWindow = { low: 0.5, high: 2 } as const;
/** Fewer do not show what is usual. */
const fewestAreas = { levels: 3, all: 5 } as const;

interface InternalArea {
  readonly area: number;
  /** What is alike in all injections: the area, or, of a standard in the whole extract, the area in its full volume. */
  readonly comparable: number;
  readonly record: DraftRecord;
  readonly cell: { readonly row: number; readonly column: number };
}

/** Asks about injections in which an injection internal standard is far from the area that it has elsewhere. */
export function checkInternalStandards(
  records: readonly DraftRecord[],
  { experiments, panel }: Pick<Expectation, 'experiments' | 'panel'>,
  problems: Problems
): void {
  const volumes = new Map(
    experiments.flatMap(({ replicates }) =>
      replicates.map(({ id, finalVolumeMl }) => [id, finalVolumeMl] as const)
    )
  );
  const points = new Map(
    panel.flatMap(({ internalStandard }) =>
      internalStandard ? [[internalStandard.panelEntryId, internalStandard.point] as const] : []
    )
  );
  for (const entry of panel) {
    if (entry.role !== 'injection internal standard') continue;
    const isInVial = (points.get(entry.id) ?? 'vial') === 'vial';
    const areas = internalAreas(entry, records, panel, (area, record) =>
      isInVial ? area : inFullVolume(area, record, volumes)
    );
    const usual = (isInVial ? entry.typicalArea : null) ?? usualArea(areas);
    if (usual === null || usual <= 0) continue;
    for (const { area, comparable, record, cell } of areas) {
      if (comparable >= usual * internalWindow.low && comparable <= usual * internalWindow.high) continue;
      problems.question({
        code: 'internal standard outside window',
        sheet: record.sheet,
        ...cell,
        found: shortNumber(area),
        expected: `half to twice its usual ${isInVial ? 'area' : 'area for the volume'}`,
        what: `The area of ${entry.name} in injection ${record.injection} of ${record.placeName} is ${shortNumber(area)}, ${Math.round((100 * comparable) / usual)} % of what is usual in this file${isInVial ? '' : ' for that volume'}. All results of this injection rest on it.`,
        fix: 'Inject again, correct the area, or confirm it as it stands.'
      });
    }
  }
}

/** A standard in the whole extract is the thinner the more volume there is and the more the vial was diluted. */
function inFullVolume(
  area: number,
  { place, finalVolumeMl, dilution }: DraftRecord,
  volumes: ReadonlyMap<string, number | null>
): number {
  // Levels are made up in another way.
  if (place.kind !== 'extract') return NaN;
  return area * (finalVolumeMl ?? volumes.get(place.replicateId) ?? 1) * (dilution ?? 1);
}

function usualArea(all: readonly InternalArea[]): number | null {
  const levels = all.filter(({ record }) => record.place.kind === 'level');
  if (levels.length >= fewestAreas.levels) return medianOf(levels.map(({ comparable }) => comparable));
  return all.length >= fewestAreas.all ? medianOf(all.map(({ comparable }) => comparable)) : null;
}

/** Its area in each injection, whether it is a row of its own or stands beside those it corrects. */
function internalAreas(
  standard: PanelExpectation,
  records: readonly DraftRecord[],
  panel: readonly PanelExpectation[],
  comparableOf: (area: number, record: DraftRecord) => number
): readonly InternalArea[] {
  const corrected = new Set(
    panel.filter(({ internalStandard }) => internalStandard?.panelEntryId === standard.id).map(({ id }) => id)
  );
  const found = new Map<string, InternalArea>();
  for (const record of records) {
    if (record.basis !== 'area' || record.state !== 'value') continue;
    const isOwn = record.panelEntryId === standard.id;
    const area = isOwn ? record.value : corrected.has(record.panelEntryId) ? record.internalArea : null;
    // An instrument blank may be run without any.
    const isBlank = record.place.kind === 'check' && record.place.checkKind === 'instrument blank';
    const key = injectionKey(record);
    if (area === null || isBlank || found.has(key)) continue;
    const comparable = comparableOf(area, record);
    const { row, column } = isOwn ? record : (record.internalCell ?? record);
    if (!Number.isNaN(comparable)) found.set(key, { area, comparable, record, cell: { row, column } });
  }
  return [...found.values()];
}
