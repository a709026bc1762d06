import { cellAddress } from './cell-address';
import { numberedChecks } from './check-injections';
import type { DraftRecord } from './map-sheet';
import type { Problems } from './problems';
import { extractKey, injectionKey } from './record-keys';
import type { Expectation, PanelExpectation } from './types';
import { expectedWords } from './value-words';

/**
 * The checks that look at several rows at once. Properties of an extract (final volume, aliquot share) and of an injection
 * (dilution) need to be given in one of its rows only and are filled into the others; internal standards given as analytes of
 * their own are linked.
 *
 * @returns the records that can stand; drafts are filled in place
 */
export function checkRecords(
  drafts: readonly DraftRecord[],
  expectation: Expectation,
  problems: Problems
): readonly DraftRecord[] {
  const panel = new Map(expectation.panel.map((entry) => [entry.id, entry]));
  const records = withoutRepeats(numberedChecks(drafts, panel, problems), panel, problems);
  shareWithin(records, extractKey, 'finalVolumeMl', 'final volume', problems);
  shareWithin(records, extractKey, 'aliquotShare', 'aliquot share', problems);
  shareWithin(records, injectionKey, 'dilution', 'dilution', problems);
  dropWhatBasisTakesNot(records, problems);
  linkInternalStandards(records, panel, problems);
  checkVolumes(records, expectation, panel, problems);
  checkLimits(records, panel, problems);
  return records;
}

function withoutRepeats(
  drafts: readonly DraftRecord[],
  panel: ReadonlyMap<string, PanelExpectation>,
  problems: Problems
): readonly DraftRecord[] {
  const first = new Map<string, DraftRecord>();
  return drafts.filter((draft) => {
    const key = `${injectionKey(draft)} ${draft.panelEntryId}`;
    const earlier = first.get(key);
    if (!earlier) {
      first.set(key, draft);
      return true;
    }
    const name = panel.get(draft.panelEntryId)?.name ?? '';
    problems.error({
      code: 'same injection twice',
      sheet: draft.sheet,
      row: draft.row,
      column: draft.column,
      found: `“${draft.rawText}”`,
      expected: 'each injection of a sample once for each analyte',
      what: `Injection ${draft.injection} of ${draft.placeName} has a result for ${name} already, in ${earlier.sheet}, ${cellAddress(earlier.row, earlier.column)}.`,
      fix: 'Remove one of the two, or number the injections in a column “Injection”.'
    });
    return false;
  });
}

function shareWithin(
  records: readonly DraftRecord[],
  keyOf: (record: DraftRecord) => string,
  property: 'finalVolumeMl' | 'aliquotShare' | 'dilution',
  called: string,
  problems: Problems
): void {
  const given = new Map<string, { value: number; record: DraftRecord }>();
  for (const record of records) {
    const value = record[property];
    if (value === null) continue;
    const known = given.get(keyOf(record));
    if (!known) given.set(keyOf(record), { value, record });
    else if (known.value !== value) {
      problems.oncePer(`${property} ${keyOf(record)}`, 'error', {
        code: 'differs within extract',
        sheet: record.sheet,
        row: record.row,
        column: record.column,
        found: String(value),
        expected: String(known.value),
        what: `The ${called} of ${record.placeName} is ${value} in this row and ${known.value} in row ${known.record.row + 1} of ${known.record.sheet}.`,
        fix: `Give one ${called}, once or the same in each row.`
      });
    }
  }
  for (const record of records) record[property] ??= given.get(keyOf(record))?.value ?? null;
}

/** Amounts of a whole fraction and concentrations in the sample take no dilution and share any more, levels and checks neither. */
function dropWhatBasisTakesNot(records: readonly DraftRecord[], problems: Problems): void {
  for (const record of records) {
    const { kind } = record.place;
    if (kind === 'extract' && record.basis !== 'ng' && record.basis !== 'ng_per_l') continue;
    for (const [property, called] of [
      ['dilution', 'dilution'],
      ['aliquotShare', 'aliquot share']
    ] as const) {
      const value = record[property];
      record[property] = null;
      if (value === null || value === 1) continue;
      const subject =
        kind !== 'extract'
          ? 'calibration levels and checks'
          : record.basis === 'ng'
            ? 'amounts in ng'
            : 'results in ng/L of sample';
      problems.oncePer(`${property} ${subject}`, 'question', {
        code: 'not taken by basis',
        sheet: record.sheet,
        row: record.row,
        column: record.column,
        found: `a ${called} of ${value}`,
        expected: `no ${called}`,
        what: `A ${called} of ${value} is given for ${record.placeName}, but ${subject} are taken as they are: it will not be applied. Is it in the numbers already?`,
        fix: `Confirm if it is. If it is not, bring ng/mL in the vial or peak areas, or correct the numbers.`
      });
    }
  }
}

function linkInternalStandards(
  records: readonly DraftRecord[],
  panel: ReadonlyMap<string, PanelExpectation>,
  problems: Problems
): void {
  const areas = new Map<string, DraftRecord>();
  for (const record of records) {
    if (record.basis === 'area' && record.state === 'value')
      areas.set(`${injectionKey(record)} ${record.panelEntryId}`, record);
  }
  for (const record of records) {
    if (record.basis !== 'area') continue;
    const standard = panel.get(record.panelEntryId)?.internalStandard;
    if (!standard) continue;
    const own = areas.get(`${injectionKey(record)} ${standard.panelEntryId}`);
    const name = panel.get(standard.panelEntryId)?.name ?? 'its internal standard';
    const { row, column } = record.internalCell ?? record;
    const at = { sheet: record.sheet, row, column };
    if (record.internalArea !== null && own && own.value !== record.internalArea) {
      problems.error({
        code: 'internal standard area twice',
        ...at,
        found: String(record.internalArea),
        expected: String(own.value),
        what: `The area of ${name} in this injection is ${record.internalArea} here and ${own.value} in ${own.sheet}, ${cellAddress(own.row, own.column)}.`,
        fix: 'Keep the right one.'
      });
    }
    record.internalArea ??=
      own?.value !== undefined && own.value !== null && own.value > 0 ? own.value : null;
    if (record.internalArea !== null || record.isInternalAreaFaulty || record.state !== 'value') continue;
    problems.oncePer(
      `${record.internalCell === null ? 'no column' : injectionKey(record)} ${standard.panelEntryId}`,
      'error',
      {
        code: 'internal standard area missing',
        ...at,
        found: own ? 'an area of 0' : 'none',
        expected: `the peak area of ${name}`,
        what: `${panel.get(record.panelEntryId)?.name ?? 'This analyte'} of ${record.placeName} is calibrated with ${name}, but its area in this injection is not in the file.`,
        fix: `Add the area of ${name}: in the column beside, or as a row or column of its own.`
      }
    );
  }
}

function checkVolumes(
  records: readonly DraftRecord[],
  expectation: Expectation,
  panel: ReadonlyMap<string, PanelExpectation>,
  problems: Problems
): void {
  const onRecord = new Map(
    expectation.experiments.flatMap(({ replicates }) =>
      replicates.map(({ id, finalVolumeMl }) => [id, finalVolumeMl])
    )
  );
  for (const record of records) {
    if (
      record.place.kind !== 'extract' ||
      record.finalVolumeMl !== null ||
      record.isVolumeFaulty ||
      !needsVolume(record, panel)
    )
      continue;
    if ((onRecord.get(record.place.replicateId) ?? null) !== null) continue;
    const cell = record.volumeCell;
    problems.oncePer(cell === null ? 'no column' : extractKey(record), 'error', {
      code: 'final volume missing',
      sheet: record.sheet,
      row: cell?.row ?? record.row,
      column: cell?.column ?? record.column,
      found: cell === null ? 'no column with the final volume' : 'an empty cell',
      expected: 'the final volume of the extract (mL)',
      what: `The final volume of ${record.placeName} is not in the file and not on record; without it its results cannot become amounts.`,
      fix:
        cell === null
          ? 'Add a column “Final volume (mL)”.'
          : 'Fill it in, in one row of the extract at least.'
    });
  }
}

/** External calibration and a standard in the vial give a content per mL; with a standard in the whole extract the volume cancels. */
function needsVolume(record: DraftRecord, panel: ReadonlyMap<string, PanelExpectation>): boolean {
  if (record.state === 'missing' || record.state === 'above') return false;
  if (record.basis === 'vial') return true;
  if (record.basis !== 'area') return false;
  const entry = panel.get(record.panelEntryId);
  if (entry?.role === 'injection internal standard') return false;
  return !entry?.internalStandard || entry.internalStandard.point === 'vial';
}

function checkLimits(
  records: readonly DraftRecord[],
  panel: ReadonlyMap<string, PanelExpectation>,
  problems: Problems
): void {
  for (const record of records) {
    const isBare = (record.state === 'not detected' || record.state === 'below') && record.limit === null;
    const entry = panel.get(record.panelEntryId);
    if (!isBare || record.place.kind !== 'extract') continue;
    // A lowest level is a content of the vial: it says nothing of a whole fraction, nor of a litre of sample.
    const isOfVial = record.basis === 'area' || record.basis === 'vial';
    if (isOfVial && entry?.hasLowestLevel) continue;
    if (entry?.role === 'injection internal standard') continue;
    problems.oncePer(record.panelEntryId, 'question', {
      code: 'limit missing',
      sheet: record.sheet,
      row: record.row,
      column: record.column,
      found: `“${record.rawText}”`,
      expected: 'a limit, such as <0.5',
      what: `${entry?.name ?? 'This analyte'} was not detected, but the file gives no limit and ${isOfVial ? 'there is no calibration level to take one from' : `a calibration level cannot stand for ${expectedWords[record.basis]}`}.`,
      fix: 'Write the limit (<x) in the unit of the column, or confirm: the portion then counts as incomplete for this analyte.'
    });
  }
}
