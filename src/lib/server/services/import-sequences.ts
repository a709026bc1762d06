import { Sequence } from '../db/models/sequence';
import type { Expectation, MappedRecord, Place } from '../imports/types';

/** What stands for the instrument of extracts whose experiment names no calibration set. */
export const unnamedInstrument = 'not named';

/**
 * Makes the sequences of an import, one for each instrument it speaks of: a level or check was run on the instrument of its set, an
 * extract on that of the set its experiment names. Extracts whose experiment names none join the only instrument of the file, where
 * there is one.
 *
 * @returns which sequence each record belongs to
 */
export async function createSequences(
  ids: Readonly<{ labId: string; studyId: string; importId: string }>,
  records: readonly MappedRecord[],
  expectation: Expectation
): Promise<(record: MappedRecord) => string> {
  const instruments = new Map(expectation.calibrationSets.map(({ id, instrument }) => [id, instrument]));
  const setOf = new Map(expectation.experiments.map(({ id, calibrationSetId }) => [id, calibrationSetId]));
  const named = ({ place }: MappedRecord): string | null =>
    instruments.get(
      (place.kind === 'extract' ? setOf.get(place.experimentId) : place.calibrationSetId) ?? ''
    ) ?? null;

  const all = new Set(records.map(named).filter((instrument) => instrument !== null));
  const [only] = all.size === 1 ? all : [];
  const instrumentOf = (record: MappedRecord): string => named(record) ?? only ?? unnamedInstrument;

  const days = new Map<string, string | null>();
  for (const record of records) {
    const instrument = instrumentOf(record);
    const day = record.acquiredAt?.slice(0, 10) ?? null;
    const known = days.get(instrument) ?? null;
    days.set(instrument, known === null || (day !== null && day < known) ? day : known);
  }
  const created = new Map<string, string>();
  for (const [instrument, runOn] of days) {
    const sequence = await Sequence.create({ ...ids, instrument, runOn });
    created.set(instrument, sequence.id);
  }
  return (record) => {
    const id = created.get(instrumentOf(record));
    if (id === undefined) throw new Error('a record belongs to no sequence of its import');
    return id;
  };
}

export function injectionKind(place: Place): 'extract' | 'level' | 'check' | 'blank' {
  if (place.kind !== 'check') return place.kind;
  return place.checkKind === 'instrument blank' ? 'blank' : 'check';
}
