import type { DraftRecord } from './map-sheet';
import type { Problems } from './problems';
import { grouped, medianOf, shortNumber } from './record-keys';
import type { Expectation, PanelExpectation } from './types';

/** How far results may be apart before it is asked (common practice, no source). */
const far = {
  /** Times the median of the fellows, or that part of it. */
  ratio: 2,
  /** Fellows that differ more than so many times among themselves say nothing of another. */
  agreement: 1.5,
  /** Below this share of what the analyte has in its largest fraction, scatter is to be expected. */
  share: 0.1,
  tenfold: { low: 7.5, high: 13 }
} as const;

/** One replicate's result of one analyte in one fraction, over its injections. */
interface Result {
  readonly value: number;
  readonly record: DraftRecord;
}

/**
 * Asks about a replicate whose result is far from its fellows of the same kind, and about results that are about ten times what their
 * fellows, or the amount added, would have them: mostly a dilution, a unit or a decimal mark.
 */
export function checkFellows(
  records: readonly DraftRecord[],
  expectation: Expectation,
  panel: ReadonlyMap<string, PanelExpectation>,
  problems: Problems
): void {
  const kinds = new Map(
    expectation.experiments.flatMap(({ replicates }) => replicates.map(({ id, kind }) => [id, kind] as const))
  );
  const values = records.filter(
    ({ state, value, panelEntryId }) =>
      state === 'value' && value !== null && panel.get(panelEntryId)?.role !== 'injection internal standard'
  );
  const byAnalyte = grouped(values, ({ place, panelEntryId, basis }) =>
    place.kind === 'extract'
      ? `${place.experimentId} ${kinds.get(place.replicateId)} ${panelEntryId} ${basis}`
      : null
  );
  for (const ofAnalyte of byAnalyte.values()) {
    const fractions = [...grouped(ofAnalyte, fractionOf).values()].map((each) => resultsOf(each, panel));
    const largest = Math.max(...fractions.map((results) => medianOf(results.map(({ value }) => value))));
    for (const results of fractions) {
      for (const result of results) askAbout(result, results, largest * far.share, panel, problems);
    }
  }
  checkSpikes(values, expectation, panel, problems);
}

function fractionOf({ place }: DraftRecord): string | null {
  return place.kind === 'extract' ? String(place.fractionId) : null;
}

function resultsOf(
  records: readonly DraftRecord[],
  panel: ReadonlyMap<string, PanelExpectation>
): readonly Result[] {
  const byReplicate = grouped(records, ({ place }) => (place.kind === 'extract' ? place.replicateId : null));
  return [...byReplicate.values()].flatMap((injections): readonly Result[] => {
    const [record] = injections;
    return record
      ? [{ value: mean(injections.map((each) => comparable(each, panel.get(each.panelEntryId)))), record }]
      : [];
  });
}

function mean(values: readonly number[]): number {
  return values.reduce((sum, value) => sum + value, 0) / values.length;
}

/** Proportional to the amount in the fraction, as far as the file tells. */
function comparable(record: DraftRecord, entry: PanelExpectation | undefined): number {
  const { basis, value, internalArea, dilution, aliquotShare, finalVolumeMl } = record;
  const reported = value ?? NaN;
  if (basis === 'ng' || basis === 'ng_per_l') return reported;
  const isRatio = basis === 'area' && internalArea !== null;
  const content = isRatio ? reported / internalArea : reported;
  // With a standard in the whole extract, volume and dilution cancel.
  const cancels = isRatio && entry?.internalStandard?.point !== 'vial';
  return (content * (cancels ? 1 : (dilution ?? 1) * (finalVolumeMl ?? 1))) / (aliquotShare ?? 1);
}

function askAbout(
  { value, record }: Result,
  results: readonly Result[],
  least: number,
  panel: ReadonlyMap<string, PanelExpectation>,
  problems: Problems
): void {
  const fellows = results.filter((each) => each.record !== record).map((each) => each.value);
  if (fellows.length < 2) return;
  const [low, high] = [Math.min(...fellows), Math.max(...fellows)];
  const usual = medianOf(fellows);
  if (low <= 0 || high > low * far.agreement || Math.max(value, usual) < least) return;
  const ratio = value / usual;
  if (ratio <= far.ratio && ratio >= 1 / far.ratio) return;
  const times = ratio > 1 ? ratio : 1 / ratio;
  const isTenfold = times >= far.tenfold.low && times <= far.tenfold.high;
  const name = panel.get(record.panelEntryId)?.name ?? 'This analyte';
  const said =
    ratio > 1
      ? `${shortNumber(ratio)} times the median of`
      : `${shortNumber(100 * ratio)} % of the median of`;
  problems.oncePer(`${record.placeName} ${isTenfold} ${ratio > 1}`, 'question', {
    code: isTenfold ? 'ten times off' : 'far from its fellows',
    sheet: record.sheet,
    row: record.row,
    column: record.column,
    found: `“${record.rawText}”`,
    expected: `about what the other ${fellows.length} replicates have`,
    what: `${name} of ${record.placeName} is ${said} its ${fellows.length} fellows, which agree with each other.${isTenfold ? ' Is its dilution in order, and its unit?' : ''}`,
    fix: 'Correct the number or its dilution, or confirm it as it was measured; a replicate can be set aside later, with its cause.'
  });
}

/** Many times the amount added is more than a portion can hold, unless the sample brought it. */
function checkSpikes(
  values: readonly DraftRecord[],
  { experiments }: Expectation,
  panel: ReadonlyMap<string, PanelExpectation>,
  problems: Problems
): void {
  const replicates = new Map(
    experiments.flatMap((experiment) =>
      experiment.replicates.map((replicate) => [replicate.id, { experiment, replicate }] as const)
    )
  );
  for (const record of values) {
    if (record.place.kind !== 'extract') continue;
    const found = replicates.get(record.place.replicateId);
    if (!found) continue;
    const { experiment, replicate } = found;
    const spike =
      replicate.spikesNg?.[record.panelEntryId] ??
      experiment.spikesNg?.[replicate.kind]?.[record.panelEntryId];
    if (spike === undefined || spike <= 0) continue;
    const amount = amountOf(record, replicate.finalVolumeMl, replicate.sampleVolumeMl ?? null);
    if (amount === null || amount < spike * far.tenfold.low) continue;
    const name = panel.get(record.panelEntryId)?.name ?? 'This analyte';
    problems.oncePer(`${record.placeName} spike`, 'question', {
      code: 'ten times off',
      sheet: record.sheet,
      row: record.row,
      column: record.column,
      found: `${shortNumber(amount)} ng`,
      expected: `not much more than the ${shortNumber(spike)} ng added`,
      what: `${name} of ${record.placeName} comes to ${shortNumber(amount)} ng, ${shortNumber(amount / spike)} times the ${shortNumber(spike)} ng that were added. Are unit, dilution and final volume in order?`,
      fix: 'Correct what is wrong, or confirm: the sample may bring so much itself.'
    });
  }
}

/** ng in the fraction, where the file and the record tell; null: not without a calibration. */
function amountOf(
  { basis, value, dilution, aliquotShare, finalVolumeMl }: DraftRecord,
  recordedVolumeMl: number | null,
  sampleVolumeMl: number | null
): number | null {
  if (value === null) return null;
  if (basis === 'ng') return value;
  if (basis === 'ng_per_l') return sampleVolumeMl === null ? null : (value * sampleVolumeMl) / 1000;
  const volume = finalVolumeMl ?? recordedVolumeMl;
  if (basis !== 'vial' || volume === null) return null;
  return (value * (dilution ?? 1) * volume) / (aliquotShare ?? 1);
}
