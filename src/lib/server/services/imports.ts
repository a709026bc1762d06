import { createHash } from 'node:crypto';
import { QueryTypes } from 'sequelize';
import type { Actor } from '../../domain/actor';
import { isAllowed } from '../../domain/permissions';
import type { ImportState } from '../../domain/vocabulary';
import type { ImportListView } from '../../views/imports';
import { config } from '../config';
import { Import } from '../db/models/import';
import type { Study } from '../db/models/study';
import { sequelize } from '../db/sequelize';
import { audit, inTransaction } from '../db/transaction';
import { Conflict, Forbidden, Invalid, NotFound } from '../errors';
import { prepareChild } from '../imports/read-in-child';
import { declaredOf, nothingDeclared, type Declared } from './import-expectation';
import { knownId } from './known-id';
import { require } from './permissions';
import { studyOf } from './study-of';

/** The import with its bytes left in the database. @throws NotFound */
export async function importOfStudy(actor: Actor, study: Study, importId: string): Promise<Import> {
  const found = await Import.findOne({
    where: { id: knownId(importId), labId: actor.labId, studyId: study.id },
    attributes: { exclude: ['fileBytes'] }
  });
  if (!found) throw new NotFound('There is no such import in this study.');
  return found;
}

/**
 * The bytes as they came. @throws NotFound
 */
export async function importFile(
  actor: Actor,
  studyCode: string,
  importId: string
): Promise<Readonly<{ fileName: string; bytes: Buffer }>> {
  require(actor, 'studies.see');
  const study = await studyOf(actor, studyCode);
  const { id, fileName } = await importOfStudy(actor, study, importId);
  return { fileName, bytes: await bytesOf(id) };
}

/** The stored bytes of an import whose owner was checked before. */
export async function bytesOf(importId: string): Promise<Buffer> {
  const found = await Import.findByPk(importId, { attributes: ['id', 'fileBytes'] });
  if (!found) throw new NotFound();
  return found.fileBytes;
}

export interface Received {
  readonly importId: string;
  /** When and by whom the very same bytes were stored before; null: they are new to the study. */
  readonly storedBefore: Readonly<{ at: string; by: string; importId: string }> | null;
}

/**
 * Keeps an uploaded file as it came, before anything of it is read. Bytes that the study already holds are not kept twice:
 * the import that has them answers.
 *
 * @param input.experimentNumber the experiment it was dropped on, when there is one
 * @throws Invalid for no file, an empty one or one over the upload limit; NotFound; Forbidden
 */
export async function receiveFile(
  actor: Actor,
  studyCode: string,
  input: Readonly<{ fileName: string; bytes: Buffer; experimentNumber: number | null }>
): Promise<Received> {
  require(actor, 'data.enter');
  const study = await studyOf(actor, studyCode);
  const { bytes } = input;
  const fileName =
    input.fileName
      .replace(/^.*[\\/]/, '')
      .trim()
      .slice(0, 255) || 'unnamed file';
  const limit = config().uploadLimitBytes;
  if (bytes.length === 0) {
    throw Invalid.at('file', `${fileName} is empty. Choose the file that holds the values.`, {
      found: '0 bytes'
    });
  }
  if (bytes.length > limit) {
    throw Invalid.at(
      'file',
      `${fileName} is larger than this lab takes (${Math.round(limit / 1024 / 1024)} MB). Bring the table of values alone.`,
      { found: `${(bytes.length / 1024 / 1024).toFixed(1)} MB` }
    );
  }
  const experimentId =
    input.experimentNumber === null ? null : await experimentIdOf(study, input.experimentNumber);
  const sha256 = createHash('sha256').update(bytes).digest('hex');
  // What follows reads the file: its process starts while the bytes are kept.
  prepareChild();

  return inTransaction(actor, { study: study.id }, async () => {
    // One at a time, so that bytes which come twice at the same moment are kept once.
    await studyOf(actor, studyCode, { locked: true });
    const known = await sameBytes(actor, study, sha256);
    if (known?.state === 'stored') {
      return {
        importId: known.id,
        storedBefore: { at: known.stored_at.toISOString(), by: known.stored_by, importId: known.id }
      };
    }
    if (known?.state === 'received') {
      // The upload is repeated, perhaps from another experiment's page: what is said of it follows the last one, and what somebody
      // worked out about it since (how it is read, what labels mean, mended cells) stays.
      const waiting = await importOfStudy(actor, study, known.id);
      const { map, assignments, mends } = declaredOf(waiting.declared);
      await Import.update(
        { declared: { ...nothingDeclared, experimentId, map, assignments, mends } },
        { where: { id: known.id, state: 'received' } }
      );
      return { importId: known.id, storedBefore: null };
    }
    const received = await Import.create({
      labId: actor.labId,
      studyId: study.id,
      fileName,
      fileBytes: bytes,
      byteSize: bytes.length,
      sha256,
      declared: { ...nothingDeclared, experimentId },
      receivedBy: actor.userId
    });
    audit({
      action: 'received',
      entity: 'import',
      entityId: received.id,
      studyId: study.id,
      sentence: `The file ${fileName} was received.`,
      after: { fileName, bytes: bytes.length, sha256 }
    });
    return { importId: received.id, storedBefore: null };
  });
}

async function experimentIdOf(study: Study, number: number): Promise<string> {
  const [row] = await sequelize.query<{ id: string }>(
    'SELECT id FROM experiments WHERE lab_id = $1 AND study_id = $2 AND number = $3',
    { bind: [study.labId, study.id, number], type: QueryTypes.SELECT }
  );
  if (!row) throw new NotFound('There is no such experiment in this study.');
  return row.id;
}

/** The import that holds these bytes already, one that is stored before one that waits. */
export async function sameBytes(
  actor: Actor,
  study: Study,
  sha256: string
): Promise<{ id: string; state: ImportState; stored_at: Date; stored_by: string } | undefined> {
  const [row] = await sequelize.query<{ id: string; state: ImportState; stored_at: Date; stored_by: string }>(
    `SELECT i.id, i.state, i.stored_at, u.name AS stored_by FROM imports i LEFT JOIN users u ON u.id = i.stored_by
      WHERE i.lab_id = $1 AND i.study_id = $2 AND i.sha256 = $3 AND i.state IN ('received', 'stored')
      ORDER BY i.state = 'stored' DESC LIMIT 1`,
    { bind: [actor.labId, study.id, sha256], type: QueryTypes.SELECT }
  );
  return row;
}

/**
 * Declares something about a file that is not stored yet (what its numbers are, its decimal mark), in answer to a question.
 * @throws Conflict when it is no longer waiting
 */
export async function declareAboutImport(
  actor: Actor,
  studyCode: string,
  importId: string,
  declared: Pick<Declared, 'basis' | 'decimal'> & Partial<Pick<Declared, 'map'>>
): Promise<void> {
  require(actor, 'data.enter');
  const study = await studyOf(actor, studyCode);
  const found = await importOfStudy(actor, study, importId);
  await inTransaction(actor, { study: study.id }, async () => {
    const [changed] = await Import.update(
      { declared: { ...nothingDeclared, ...found.declared, ...declared } },
      { where: { id: found.id, labId: actor.labId, state: 'received' } }
    );
    if (changed === 0) throw new Conflict('This file is no longer waiting to be stored.');
  });
}

/** Leaves a received file unstored. Its bytes stay. @throws Conflict when it is no longer waiting */
export async function dropImport(actor: Actor, studyCode: string, importId: string): Promise<void> {
  require(actor, 'data.enter');
  const study = await studyOf(actor, studyCode);
  const found = await importOfStudy(actor, study, importId);
  await inTransaction(actor, { study: study.id }, async () => {
    const [changed] = await Import.update(
      { state: 'dropped', endedBy: actor.userId, endedAt: new Date() },
      { where: { id: found.id, labId: actor.labId, state: 'received' } }
    );
    if (changed === 0) throw new Conflict('This file is no longer waiting to be stored.');
    audit({
      action: 'dropped',
      entity: 'import',
      entityId: found.id,
      studyId: study.id,
      sentence: `The file ${found.fileName} was left unstored.`
    });
  });
}

/** @throws Forbidden for somebody else's import without the right to end it */
export function requireMayWithdraw(actor: Actor, stored: Pick<Import, 'storedBy'>): void {
  if (stored.storedBy !== actor.userId && !isAllowed(actor.role, 'imports.withdraw-any')) {
    throw new Forbidden(
      'An analyst withdraws their own imports. Ask a chemist or a lab manager for this one.'
    );
  }
}

/**
 * Withdraws a stored import as a whole: its values stop counting, and those that it had covered count again.
 * @throws Invalid without a reason; Forbidden for somebody else's import without the right to; Conflict
 */
export async function withdrawImport(
  actor: Actor,
  studyCode: string,
  importId: string,
  reason: string
): Promise<void> {
  require(actor, 'imports.withdraw-own');
  const study = await studyOf(actor, studyCode);
  const found = await importOfStudy(actor, study, importId);
  requireMayWithdraw(actor, found);
  const cause = reason.trim();
  if (cause.length < 3) {
    throw Invalid.at('reason', 'Say why this import is withdrawn. It stays on record with your name.', {
      expected: 'a few words'
    });
  }
  await inTransaction(actor, { study: study.id }, async () => {
    const [changed] = await Import.update(
      { state: 'withdrawn', endedBy: actor.userId, endedAt: new Date(), endReason: cause },
      { where: { id: found.id, labId: actor.labId, state: 'stored' } }
    );
    if (changed === 0)
      throw new Conflict('Only a stored import can be withdrawn, and this one is not stored.');
    audit({
      action: 'withdrawn',
      entity: 'import',
      entityId: found.id,
      studyId: study.id,
      sentence: `The import of ${found.fileName} was withdrawn: its values no longer count.`,
      before: { state: 'stored' },
      after: { state: 'withdrawn' },
      reason: cause
    });
  });
}

interface ListRow {
  readonly id: string;
  readonly file_name: string;
  readonly byte_size: number;
  readonly sha256: string;
  readonly state: ImportState;
  readonly counts: Readonly<Record<string, number>>;
  readonly received_at: Date;
  readonly received_by: string;
  readonly stored_at: Date | null;
  readonly stored_by: string | null;
  readonly stored_by_id: string | null;
  readonly ended_at: Date | null;
  readonly ended_by: string | null;
  readonly end_reason: string | null;
  readonly experiments: string[] | null;
}

/** Every file that a study ever received, the newest first. */
export async function listImports(actor: Actor, studyCode: string): Promise<readonly ImportListView[]> {
  require(actor, 'studies.see');
  return listed(actor, await studyOf(actor, studyCode), null);
}

/** One file of a study as its list shows it. @throws NotFound */
export async function listedImport(actor: Actor, study: Study, importId: string): Promise<ImportListView> {
  const [found] = await listed(actor, study, knownId(importId));
  if (!found) throw new NotFound('There is no such import in this study.');
  return found;
}

/** @param importId null: all of them */
async function listed(
  actor: Actor,
  study: Study,
  importId: string | null
): Promise<readonly ImportListView[]> {
  const rows = await sequelize.query<ListRow>(
    `SELECT i.id, i.file_name, i.byte_size, i.sha256, i.state, i.counts, i.received_at, r.name AS received_by,
        i.stored_at, s.name AS stored_by, i.stored_by AS stored_by_id, i.ended_at, e.name AS ended_by, i.end_reason,
        (SELECT array_agg('experiment ' || x.number || ', ' || x.title ORDER BY x.number) FROM experiments x
          WHERE x.id IN (SELECT DISTINCT experiment_id FROM extracts WHERE import_id = i.id)) AS experiments
      FROM imports i JOIN users r ON r.id = i.received_by
        LEFT JOIN users s ON s.id = i.stored_by LEFT JOIN users e ON e.id = i.ended_by
      WHERE i.lab_id = $1 AND i.study_id = $2 AND ($3::uuid IS NULL OR i.id = $3)
      ORDER BY i.received_at DESC, i.id DESC`,
    { bind: [actor.labId, study.id, importId], type: QueryTypes.SELECT }
  );
  return rows.map((row) => ({
    id: row.id,
    fileName: row.file_name,
    byteSize: row.byte_size,
    sha256: row.sha256,
    state: row.state,
    valueCount: row.counts['records'] ?? 0,
    experiments: row.experiments ?? [],
    receivedAt: row.received_at.toISOString(),
    receivedBy: row.received_by,
    storedAt: row.stored_at?.toISOString() ?? null,
    storedBy: row.stored_by,
    endedAt: row.ended_at?.toISOString() ?? null,
    endedBy: row.ended_by,
    endReason: row.end_reason,
    mayWithdraw:
      row.state === 'stored' &&
      isAllowed(actor.role, 'imports.withdraw-own') &&
      (row.stored_by_id === actor.userId || isAllowed(actor.role, 'imports.withdraw-any'))
  }));
}
