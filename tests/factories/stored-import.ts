import { createHash, randomBytes } from 'node:crypto';
import { QueryTypes } from 'sequelize';
import type { Actor } from '../../src/lib/domain/actor';
import { copyMeasurements, type NewMeasurement } from '../../src/lib/server/db/measurement-copy';
import { Extract } from '../../src/lib/server/db/models/extract';
import { Import } from '../../src/lib/server/db/models/import';
import { Injection } from '../../src/lib/server/db/models/injection';
import { Sequence } from '../../src/lib/server/db/models/sequence';
import type { Study } from '../../src/lib/server/db/models/study';
import { sequelize } from '../../src/lib/server/db/sequelize';
import { inTransaction } from '../../src/lib/server/db/transaction';

/** One reported number of an extract (`experimentId`, `replicateId`, `fractionId`) or of a level (`calibrationSetId`, `levelId`). */
export interface MadeNumber {
  readonly experimentId?: string;
  readonly replicateId?: string;
  readonly fractionId?: string | null;
  readonly calibrationSetId?: string;
  readonly levelId?: string;
  readonly analyteId: string;
  readonly reported: number | null;
  readonly internalArea?: number | null;
  readonly internalAnalyteId?: string | null;
  readonly basis?: NewMeasurement['basis'];
  readonly state?: NewMeasurement['state'];
  readonly finalVolumeMl?: number;
  readonly dilution?: number;
  readonly rawText?: string;
}

/** An import in state received: a file that nobody has looked into yet. */
export async function makeReceivedImport(
  actor: Actor,
  study: Study,
  fileName = 'areas.xlsx'
): Promise<Import> {
  const fileBytes = randomBytes(64);
  return Import.create({
    labId: study.labId,
    studyId: study.id,
    fileName,
    fileBytes,
    byteSize: fileBytes.length,
    sha256: createHash('sha256').update(fileBytes).digest('hex'),
    sheetNames: ['Areas'],
    receivedBy: actor.userId
  });
}

/** A stored import with its sequence, extracts, injections and measurements, one number a row. */
export async function makeStoredImport(
  actor: Actor,
  study: Study,
  numbers: readonly MadeNumber[]
): Promise<Import> {
  const ids = { labId: study.labId, studyId: study.id };
  return inTransaction(actor, { study: study.id }, async () => {
    const stored = await makeReceivedImport(actor, study);
    const sequence = await Sequence.create({
      ...ids,
      importId: stored.id,
      instrument: 'Instrument 1',
      runOn: null
    });
    const injectionOf = new Map<string, string>();
    const rows: NewMeasurement[] = [];
    for (const [index, number] of numbers.entries()) {
      const place = `${number.replicateId ?? ''} ${number.fractionId ?? ''} ${number.levelId ?? ''}`;
      if (!injectionOf.has(place)) {
        const extract = number.replicateId
          ? await Extract.create({
              ...ids,
              importId: stored.id,
              experimentId: number.experimentId ?? '',
              replicateId: number.replicateId,
              fractionId: number.fractionId ?? null,
              finalVolumeMl: number.finalVolumeMl ?? 1
            })
          : null;
        const injection = await Injection.create({
          ...ids,
          importId: stored.id,
          sequenceId: sequence.id,
          position: injectionOf.size + 1,
          kind: extract ? 'extract' : 'level',
          extractId: extract?.id ?? null,
          levelId: number.levelId ?? null,
          dilution: number.dilution ?? 1
        });
        injectionOf.set(place, injection.id);
      }
      rows.push({
        labId: study.labId,
        importId: stored.id,
        injectionId: injectionOf.get(place) ?? '',
        experimentId: number.experimentId ?? null,
        calibrationSetId: number.calibrationSetId ?? null,
        analyteId: number.analyteId,
        basis: number.basis ?? 'area',
        state: number.state ?? (number.reported === null ? 'missing' : 'value'),
        reported: number.reported,
        internalArea: number.internalArea ?? null,
        internalAnalyteId: number.internalAnalyteId ?? null,
        limitValue: null,
        rawText: number.rawText ?? String(number.reported ?? ''),
        sheet: 1,
        sheetRow: index + 2,
        sheetColumn: 4
      });
    }
    await copyMeasurements(rows);
    const [order] = await sequelize.query<{ next: string }>(
      `SELECT nextval('imports_stored_order') AS next`,
      {
        type: QueryTypes.SELECT
      }
    );
    await stored.update({
      state: 'stored',
      storedOrder: order?.next ?? null,
      storedBy: actor.userId,
      storedAt: new Date()
    });
    return stored;
  });
}
