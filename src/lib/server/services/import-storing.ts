import { QueryTypes, type CreationAttributes } from 'sequelize';
import type { Actor } from '../../domain/actor';
import {
  copyMeasurements,
  copyQualifiers,
  type NewMeasurement,
  type NewQualifier
} from '../db/measurement-copy';
import { newId } from '../db/entity-id';
import { Extract } from '../db/models/extract';
import { Import } from '../db/models/import';
import { Injection } from '../db/models/injection';
import type { Study } from '../db/models/study';
import { sequelize } from '../db/sequelize';
import { audit, inTransaction } from '../db/transaction';
import { Conflict, Invalid, NotFound } from '../errors';
import type { Expectation, MappedImport, MappedRecord } from '../imports/types';
import { coveredPlaces } from './import-coverage';
import { declaredOf, loadExpectation } from './import-expectation';
import { readKeptFile, type FileRead } from './import-reading';
import { createSequences, injectionKind } from './import-sequences';
import { importOfStudy, requireMayWithdraw } from './imports';
import { require } from './permissions';
import { studyOf } from './study-of';

export interface StoredImport {
  readonly importId: string;
  readonly recordCount: number;
  readonly experimentNumbers: readonly number[];
}

/**
 * Stores what a received file says: all of it or nothing. It is read once more against what the study offers now.
 *
 * @param input.questionsConfirmed the person read the open questions and takes the values as they stand; a program says it
 *   of each code
 * @param input.reason why values that are on record are covered; needed when any are
 * @param input.supersedes imports whose place this file takes as a whole: what it holds nothing for stops counting too
 * @throws Invalid naming every problem with sheet and cell; Conflict when it is not waiting, or the study changed meanwhile
 */
export async function storeImport(
  actor: Actor,
  studyCode: string,
  importId: string,
  input: Readonly<{
    questionsConfirmed: boolean | ((code: string) => boolean);
    reason: string;
    supersedes?: readonly string[];
  }>
): Promise<StoredImport> {
  require(actor, 'data.enter');
  const study = await studyOf(actor, studyCode);
  const kept = await importOfStudy(actor, study, importId);
  if (kept.state !== 'received') throw notWaiting(kept.state);
  const reading = await readKeptFile(study, kept);
  if (reading.kind === 'refused') throw Invalid.at('file', reading.sentence);
  refuseProblems(reading.mapped, input.questionsConfirmed);
  const { mapped, expectation } = reading;

  return inTransaction(actor, { study: study.id }, async (transaction) => {
    // The study's row first: every change of content ends with it, so what was read cannot change until the commit.
    await sequelize.query('SELECT id FROM studies WHERE lab_id = $1 AND id = $2 FOR UPDATE', {
      bind: [study.labId, study.id]
    });
    const locked = await Import.findOne({
      where: { id: kept.id, labId: actor.labId },
      attributes: { exclude: ['fileBytes'] },
      lock: transaction.LOCK.UPDATE
    });
    if (!locked) throw new NotFound();
    if (locked.state !== 'received') throw notWaiting(locked.state);
    await requireUnchanged(study, expectation, { read: kept.declared, now: locked.declared });

    const covered = await coveredPlaces(study, mapped.records, expectation);
    const reason = input.reason.trim();
    if (covered.count > 0 && reason.length < 3) {
      throw Invalid.at(
        'reason',
        `${covered.count} values that are on record (${covered.fileNames.join(', ')}) would be covered by this file. Say why.`,
        { expected: 'a few words' }
      );
    }

    const { rows, qualifiers } = await storeInjections(study, locked, mapped.records, expectation);
    await copyMeasurements(rows);
    await copyQualifiers(qualifiers);
    await markStored(actor, study, locked, reading, reason);
    for (const other of input.supersedes ?? []) await supersede(actor, study, { by: locked, other, reason });

    const numbers = await experimentNumbers(study, mapped.records);
    audit({
      action: 'stored',
      entity: 'import',
      entityId: locked.id,
      studyId: study.id,
      sentence: `${mapped.records.length === 1 ? '1 value' : `${mapped.records.length} values`} of ${locked.fileName} ${
        mapped.records.length === 1 ? 'was' : 'were'
      } stored${covered.count > 0 ? `; ${covered.count} earlier ${covered.count === 1 ? 'one is' : 'ones are'} covered` : ''}.`,
      after: {
        sha256: locked.sha256,
        values: mapped.records.length,
        experiments: numbers,
        covered: covered.count
      },
      reason: covered.count > 0 ? reason : null
    });
    return { importId: locked.id, recordCount: mapped.records.length, experimentNumbers: numbers };
  });
}

const notWaiting = (state: string): Conflict =>
  new Conflict(
    state === 'stored'
      ? 'This file is stored already. Nothing changed.'
      : `This file is ${state}; it can be uploaded again.`
  );

function refuseProblems(
  mapped: MappedImport,
  questionsConfirmed: boolean | ((code: string) => boolean)
): void {
  const isConfirmed = (code: string): boolean =>
    typeof questionsConfirmed === 'boolean' ? questionsConfirmed : questionsConfirmed(code);
  // A question that wants a declaration has left cells unread: confirming it would drop them without a word.
  const blocking = mapped.problems.filter(
    ({ severity, answer, code }) =>
      severity === 'error' || (severity === 'question' && (answer !== 'confirm' || !isConfirmed(code)))
  );
  if (blocking.length > 0) {
    throw new Invalid(
      blocking.map(({ sheet, cell, found, expected, message }) => ({
        path: [sheet, cell].filter(Boolean).join('!') || 'file',
        found,
        expected,
        message
      }))
    );
  }
  if (mapped.records.length === 0) {
    throw Invalid.at('file', 'Nothing in this file belongs to the study, so there is nothing to store.');
  }
}

async function requireUnchanged(
  study: Study,
  read: Expectation,
  declared: Readonly<{ read: unknown; now: unknown }>
): Promise<void> {
  if (JSON.stringify(declared.read) !== JSON.stringify(declared.now)) {
    throw new Conflict(
      'Somebody changed how this file is read in the meantime. Look at it once more; nothing was stored.'
    );
  }
  const now = await loadExpectation({ labId: study.labId, studyId: study.id }, declaredOf(declared.now));
  if (JSON.stringify(now) !== JSON.stringify(read)) {
    throw new Conflict(
      'The panel, the experiments or the calibration of this study changed while the file was read. Look at it once more; nothing was stored.'
    );
  }
}

interface NewRows {
  readonly rows: readonly NewMeasurement[];
  readonly qualifiers: readonly NewQualifier[];
}

/** Creates the sequences, the extracts and the injections, and gives the measurements that hang off them. */
async function storeInjections(
  study: Study,
  kept: Import,
  records: readonly MappedRecord[],
  expectation: Expectation
): Promise<NewRows> {
  const ids = { labId: study.labId, studyId: study.id, importId: kept.id };
  const sequenceOf = await createSequences(ids, records, expectation);

  const volumes = new Map(
    expectation.experiments.flatMap((experiment) =>
      experiment.replicates.map((replicate) => [replicate.id, replicate.finalVolumeMl] as const)
    )
  );
  const extracts = new Map<string, CreationAttributes<Extract> & { id: string }>();
  const injections = new Map<string, CreationAttributes<Injection> & { id: string }>();
  const injectionOf = (record: MappedRecord): string => {
    const { place } = record;
    let extractId: string | null = null;
    if (place.kind === 'extract') {
      const key = `${place.replicateId} ${place.fractionId}`;
      const extract = extracts.get(key) ?? {
        ...ids,
        id: newId(),
        experimentId: place.experimentId,
        replicateId: place.replicateId,
        fractionId: place.fractionId,
        finalVolumeMl: record.finalVolumeMl ?? volumes.get(place.replicateId) ?? null,
        aliquotShare: record.aliquotShare ?? 1
      };
      // Numbers whose basis takes no share may come first; it belongs to the extract all the same.
      if (record.aliquotShare !== null) extract.aliquotShare = record.aliquotShare;
      extracts.set(key, extract);
      extractId = extract.id;
    }
    const levelId = place.kind === 'level' ? place.levelId : null;
    const checkStandardId = place.kind === 'check' ? place.checkStandardId : null;
    const key = `${extractId} ${levelId} ${checkStandardId} ${record.injection}`;
    const injection = injections.get(key) ?? {
      ...ids,
      id: newId(),
      sequenceId: sequenceOf(record),
      position: injections.size + 1,
      kind: injectionKind(place),
      extractId,
      levelId,
      checkStandardId,
      number: record.injection,
      dilution: record.dilution ?? 1,
      runAt: null
    };
    if (record.dilution !== null) injection.dilution = record.dilution;
    // Given in one row of the injection at least.
    if (record.acquiredAt !== null) injection.runAt ??= new Date(`${record.acquiredAt}Z`);
    injections.set(key, injection);
    return injection.id;
  };

  const analytes = await analyteIds(study);
  const standards = new Map(
    expectation.panel.map((entry) => [entry.id, entry.internalStandard?.panelEntryId ?? null])
  );
  const sheets = new Map(kept.sheetNames.map((name, index) => [name, index + 1]));
  const sheetNames = [...kept.sheetNames];
  const sheetNumber = (name: string): number => {
    const known = sheets.get(name);
    if (known !== undefined) return known;
    sheetNames.push(name);
    sheets.set(name, sheetNames.length);
    return sheetNames.length;
  };

  const qualifiers: NewQualifier[] = [];
  const rows = records.map((record): NewMeasurement => {
    const { place, reported } = record;
    const standard = standards.get(record.panelEntryId) ?? null;
    const injectionId = injectionOf(record);
    const analyteId = known(analytes, record.panelEntryId);
    if (record.qualifiers) qualifiers.push({ ...ids, injectionId, analyteId, ...record.qualifiers });
    return {
      labId: study.labId,
      importId: kept.id,
      injectionId,
      experimentId: place.kind === 'extract' ? place.experimentId : null,
      calibrationSetId: place.kind === 'extract' ? null : place.calibrationSetId,
      analyteId,
      basis: reported.kind,
      state: record.state,
      reported: reported.value,
      internalArea: reported.internalArea,
      internalAnalyteId:
        reported.internalArea === null || standard === null ? null : known(analytes, standard),
      limitValue: record.limit,
      rawText: record.rawText,
      sheet: sheetNumber(record.sheet),
      sheetRow: record.row + 1,
      sheetColumn: record.column + 1
    };
  });

  kept.sheetNames = sheetNames;
  await Extract.bulkCreate([...extracts.values()]);
  await Injection.bulkCreate([...injections.values()]);
  return { rows, qualifiers };
}

function known(analytes: ReadonlyMap<string, string>, entryId: string): string {
  const id = analytes.get(entryId);
  if (id === undefined) throw new Error('a record names a panel entry that the study does not have');
  return id;
}

async function analyteIds(study: Study): Promise<ReadonlyMap<string, string>> {
  const rows = await sequelize.query<{ id: string; analyte_id: string }>(
    'SELECT id, analyte_id FROM panel_entries WHERE lab_id = $1 AND study_id = $2',
    { bind: [study.labId, study.id], type: QueryTypes.SELECT }
  );
  return new Map(rows.map((row) => [row.id, row.analyte_id]));
}

async function markStored(
  actor: Actor,
  study: Study,
  kept: Import,
  { mapped, keptMap }: FileRead,
  reason: string
): Promise<void> {
  await sequelize.query(
    `UPDATE imports SET state = 'stored', stored_order = nextval('imports_stored_order'), stored_by = $3, stored_at = now(),
        reading = $4::jsonb, counts = $5::jsonb, sheet_names = $6::text[],
        declared = declared || $7::jsonb, column_map_version_id = $8, updated_at = now()
      WHERE lab_id = $1 AND id = $2`,
    {
      bind: [
        study.labId,
        kept.id,
        actor.userId,
        JSON.stringify(mapped.reading),
        JSON.stringify({ records: mapped.records.length }),
        [...kept.sheetNames],
        // The map that it was read by stays with it, whatever becomes of the kept ones.
        JSON.stringify({ map: mapped.map, ...(reason === '' ? {} : { reason }) }),
        keptMap?.versionId ?? null
      ]
    }
  );
}

/** A file that another takes the place of stops counting as a whole; it stays on record with the reason. */
async function supersede(
  actor: Actor,
  study: Study,
  { by, other, reason }: Readonly<{ by: Import; other: string; reason: string }>
): Promise<void> {
  const found = await importOfStudy(actor, study, other);
  requireMayWithdraw(actor, found);
  if (reason.length < 3) {
    throw Invalid.at(
      'reason',
      `Say why ${found.fileName} is superseded. It stays on record with your name.`,
      {
        expected: 'a few words'
      }
    );
  }
  const [changed] = await Import.update(
    { state: 'superseded', endedBy: actor.userId, endedAt: new Date(), endReason: reason },
    { where: { id: found.id, labId: actor.labId, state: 'stored' } }
  );
  if (changed === 0 || found.id === by.id)
    throw new Conflict(`${found.fileName} does not count any more, so it cannot be superseded.`);
  await Import.update({ supersedesId: found.id }, { where: { id: by.id, labId: actor.labId } });
  audit({
    action: 'superseded',
    entity: 'import',
    entityId: found.id,
    studyId: study.id,
    sentence: `${by.fileName} took the place of ${found.fileName} as a whole.`,
    before: { state: 'stored' },
    after: { state: 'superseded', by: by.id },
    reason
  });
}

async function experimentNumbers(study: Study, records: readonly MappedRecord[]): Promise<number[]> {
  const ids = new Set(records.flatMap(({ place }) => (place.kind === 'extract' ? [place.experimentId] : [])));
  const rows = await sequelize.query<{ number: number }>(
    'SELECT number FROM experiments WHERE lab_id = $1 AND study_id = $2 AND id = ANY ($3::uuid[]) ORDER BY number',
    { bind: [study.labId, study.id, [...ids]], type: QueryTypes.SELECT }
  );
  return rows.map((row) => row.number);
}
