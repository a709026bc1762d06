import type { DraftRecord } from './map-sheet';
import type { Problems } from './problems';
import { grouped, shortNumber } from './record-keys';
import type { Expectation, ExperimentExpectation, ReplicateExpectation } from './types';

interface Portion {
  readonly experiment: ExperimentExpectation;
  readonly replicate: ReplicateExpectation;
  readonly records: readonly DraftRecord[];
}

/** Asks about what a file lacks beside what it has, and what it says otherwise than the record: fractions, surrogates, volumes, times. */
export function checkCompleteness(
  records: readonly DraftRecord[],
  expectation: Expectation,
  problems: Problems
): void {
  const portions = portionsOf(records, expectation);
  const alike = grouped(portions, ({ experiment, replicate }) => `${experiment.id} ${replicate.kind}`);
  for (const ofKind of alike.values()) askAboutFractions(ofKind, problems);
  askAboutSurrogates(portions, expectation, problems);
  for (const portion of portions) {
    askAboutSample(portion, problems);
    askAboutTimes(portion, problems);
  }
}

function portionsOf(records: readonly DraftRecord[], { experiments }: Expectation): readonly Portion[] {
  const known = new Map(
    experiments.flatMap((experiment) =>
      experiment.replicates.map((replicate) => [replicate.id, { experiment, replicate }] as const)
    )
  );
  const byReplicate = grouped(records, ({ place }) => (place.kind === 'extract' ? place.replicateId : null));
  return [...byReplicate].flatMap(([id, own]) => {
    const found = known.get(id);
    return found ? [{ ...found, records: own }] : [];
  });
}

const fractionOf = ({ place }: DraftRecord): string | null =>
  place.kind === 'extract' ? place.fractionId : null;

/** A fraction that most replicates of a kind have in the file is missing where one has not; of two nobody can say. */
function askAboutFractions(portions: readonly Portion[], problems: Problems): void {
  const own = portions.filter(({ replicate }) => replicate.takesFraction);
  if (own.length < 3) return;
  const having = own.map((portion) => ({ ...portion, fractions: new Set(portion.records.map(fractionOf)) }));
  for (const fraction of own[0]?.experiment.fractions ?? []) {
    const without = having.filter(({ fractions }) => !fractions.has(fraction.id));
    if (without.length * 2 >= having.length) continue;
    for (const { replicate, records } of without) {
      const [first] = records;
      if (!first) continue;
      problems.question({
        code: 'fraction missing in file',
        sheet: first.sheet,
        row: first.row,
        column: first.column,
        found: `${replicate.label} without ${fraction.name}`,
        expected: `${fraction.name} of each replicate, as the other ${having.length - without.length} have it`,
        what: `${replicate.label} has no results for ${fraction.name} in this file, though ${having.length - without.length} other replicates have. It then counts as incomplete.`,
        fix: 'Add its rows, or confirm that they come in another file or not at all.'
      });
    }
  }
}

/** True unless the record says what the portion received, and this was not among it. */
function received({ experiment, replicate }: Portion, entryId: string): boolean {
  if (!experiment.spikesNg) return true;
  const ofKind = experiment.spikesNg[replicate.kind] ?? {};
  return entryId in ofKind || entryId in (replicate.spikesNg ?? {});
}

/** Surrogates are judged in every portion that received them: one without a value beside results of targets is asked about. */
function askAboutSurrogates(portions: readonly Portion[], { panel }: Expectation, problems: Problems): void {
  const targets = new Set(panel.filter(({ role }) => role === 'target').map(({ id }) => id));
  const everywhere = portions.flatMap((portion) =>
    [
      ...grouped(
        portion.records.filter(({ state }) => state !== 'missing'),
        (record) => String(fractionOf(record))
      ).values()
    ]
      .filter((own) => own.some(({ panelEntryId }) => targets.has(panelEntryId)))
      .map((own) => ({ portion, own, entries: new Set(own.map(({ panelEntryId }) => panelEntryId)) }))
  );
  for (const surrogate of panel) {
    if (surrogate.role !== 'surrogate') continue;
    const places = everywhere.filter(({ portion }) => received(portion, surrogate.id));
    const without = places.filter(({ entries }) => !entries.has(surrogate.id));
    // In half of the places or fewer it was perhaps not meant to be measured.
    if (without.length * 2 >= places.length && without.length < places.length) continue;
    const [first] = without[0]?.own ?? [];
    if (!first) continue;
    const isNowhere = without.length === places.length;
    const labels = [...new Set(without.map(({ portion }) => portion.replicate.label))];
    problems.question({
      code: 'surrogate missing',
      sheet: first.sheet,
      row: first.row,
      column: first.column,
      found: isNowhere ? 'none in this file' : `none in ${labels.slice(0, 6).join(', ')}`,
      expected: `${surrogate.name} in every portion that received it`,
      what: isNowhere
        ? `The surrogate ${surrogate.name} is nowhere in this file.`
        : `The surrogate ${surrogate.name} has no result in ${first.placeName}${without.length > 1 ? ` and ${without.length - 1} more ${without.length === 2 ? 'place' : 'places'}` : ''}, though targets have.`,
      fix: 'Add its results, or confirm that they come in another file or not at all.'
    });
  }
}

/** Two volumes are one where they differ by less than this share. */
const sameVolume = 0.005;

function askAboutSample({ replicate, records }: Portion, problems: Problems): void {
  for (const [property, onRecord, called, unit] of [
    ['sampleVolumeMl', replicate.sampleVolumeMl, 'sample volume', 'mL'],
    ['sampleMassG', replicate.sampleMassG, 'sample mass', 'g']
  ] as const) {
    if (onRecord === undefined || onRecord === null) continue;
    const other = records.find((record) => {
      const given = record[property];
      return given !== null && Math.abs(given - onRecord) > sameVolume * onRecord;
    });
    if (!other) continue;
    const given = other[property] ?? NaN;
    problems.question({
      code: 'differs from record',
      sheet: other.sheet,
      row: other.row,
      column: other.column,
      found: `${shortNumber(given)} ${unit}`,
      expected: `${shortNumber(onRecord)} ${unit}, as on record`,
      what: `The ${called} of ${replicate.label} is ${shortNumber(given)} ${unit} in this file and ${shortNumber(onRecord)} ${unit} on record; what is on record counts.`,
      fix: 'Correct the record of the replicate or the file, or confirm that the record is right.'
    });
  }
}

const millisecondsPerDay = 86_400_000;

function daysBetween(from: string, to: string): number {
  const at = (iso: string): number =>
    Date.parse(/Z$|[+-]\d{2}:\d{2}$/.test(iso) ? iso : `${iso}${iso.length > 10 ? 'Z' : ''}`);
  return (at(to) - at(from)) / millisecondsPerDay;
}

/** Times of the instrument carry no zone: a day is allowed before anything is called too late or out of order. */
const zoneDays = 1;

function askAboutTimes({ experiment, replicate, records }: Portion, problems: Problems): void {
  const { collectedAt = null, extractedAt = null } = replicate;
  const { collectionToExtraction = null, extractionToAnalysis = null } = experiment.holdingDays ?? {};
  const [first] = records;
  const ask = (record: DraftRecord, days: number, allowed: number, what: string): void =>
    problems.question({
      code: 'holding time passed',
      sheet: record.sheet,
      row: record.row,
      column: record.column,
      found: `${shortNumber(days)} days`,
      expected: `at most ${shortNumber(allowed)} days`,
      what,
      fix: 'Correct the time that is wrong, or confirm that it was so.'
    });
  if (first && collectedAt !== null && extractedAt !== null && collectionToExtraction !== null) {
    const days = daysBetween(collectedAt, extractedAt);
    if (days > collectionToExtraction)
      ask(
        first,
        days,
        collectionToExtraction,
        `${replicate.label} was extracted ${shortNumber(days)} days after its collection; ${shortNumber(collectionToExtraction)} are allowed.`
      );
  }
  if (extractedAt === null) return;
  const timed = records.filter(({ acquiredAt }) => acquiredAt !== null);
  const late = timed.find(
    ({ acquiredAt }) =>
      daysBetween(extractedAt, acquiredAt ?? '') > (extractionToAnalysis ?? Infinity) + zoneDays
  );
  const early = timed.find(({ acquiredAt }) => daysBetween(extractedAt, acquiredAt ?? '') < -zoneDays);
  if (late && extractionToAnalysis !== null) {
    const days = daysBetween(extractedAt, late.acquiredAt ?? '');
    ask(
      late,
      days,
      extractionToAnalysis,
      `${late.placeName} was measured ${shortNumber(days)} days after its extraction; ${shortNumber(extractionToAnalysis)} are allowed.`
    );
  }
  if (early) {
    const days = daysBetween(extractedAt, early.acquiredAt ?? '');
    ask(
      early,
      days,
      extractionToAnalysis ?? 0,
      `${early.placeName} was measured on ${early.acquiredAt?.slice(0, 10)}, before it was extracted on ${extractedAt.slice(0, 10)}.`
    );
  }
}
