import { AsyncLocalStorage } from 'node:async_hooks';
import type { PoolClient } from 'pg';
import { DatabaseError, QueryTypes, type Transaction } from 'sequelize';
import { Conflict, NotFound } from '../errors';
import { appendAuditEvents, type AuditEntry, type QueuedAuditEvent } from './audit-append';
import { sequelize } from './sequelize';
import type { Writer } from './writer';

/** One unit of work: everything between the outermost `inTransaction` and its commit. */
interface Unit {
  readonly transaction: Transaction;
  readonly events: QueuedAuditEvent[];
  /** lab and study ids whose data version is raised before the commit */
  readonly studies: Map<string, string>;
  /** False once it ended: what still runs then, started inside but not awaited, is no part of it. */
  open: boolean;
}

interface Frame {
  readonly unit: Unit;
  readonly writer: Writer | null;
}

const shared = globalThis as typeof globalThis & { headwaterFrames?: AsyncLocalStorage<Frame> };
const frames: AsyncLocalStorage<Frame> = (shared.headwaterFrames ??= new AsyncLocalStorage());

function openFrame(): Frame | null {
  const frame = frames.getStore();
  return frame?.unit.open ? frame : null;
}

const frozen = (state: string): Conflict =>
  new Conflict(
    `The study is ${state}: its content cannot change until it is returned or a new revision is opened.`
  );

/** Fails early, before anything is written, for a study that is not there or not open. */
async function requireOpenStudy(labId: string, studyId: string): Promise<void> {
  const [study] = await sequelize.query<{ state: string }>(
    'SELECT state FROM studies WHERE lab_id = $1 AND id = $2',
    { bind: [labId, studyId], type: QueryTypes.SELECT }
  );
  if (!study) throw new NotFound();
  if (study.state !== 'draft' && study.state !== 'returned') throw frozen(study.state);
}

/** The same question asked last, under the row's lock: between the two a study may have been submitted. */
async function raiseDataVersion(labId: string, studyId: string): Promise<void> {
  const raised = await sequelize.query<{ id: string }>(
    `UPDATE studies SET data_version = data_version + 1, updated_at = now()
      WHERE lab_id = $1 AND id = $2 AND state IN ('draft', 'returned') RETURNING id`,
    { bind: [labId, studyId], type: QueryTypes.SELECT }
  );
  if (raised.length > 0) return;
  await requireOpenStudy(labId, studyId);
  throw new Conflict('The study changed its state in the meantime.');
}

/** Words for what the database itself refuses. */
function translated(error: unknown): unknown {
  if (!(error instanceof DatabaseError)) return error;
  const code: unknown = Reflect.get(error.original, 'code');
  const study = /^the study is (in review|reviewed|signed): /.exec(error.original.message);
  if (code === '23001' && study) return frozen(study[1] ?? 'not open');
  if (code === '40001' || code === '40P01') {
    return new Conflict(
      'Somebody else changed the same thing at the same moment. Nothing was stored; try again.'
    );
  }
  return error;
}

/**
 * The one way to write. Runs `work` in a database transaction: everything it awaits uses the transaction's connection by itself.
 * Inside a running one it joins that one, and only the outermost commits. Before the commit it raises the data version of every
 * study named in `options.study`, then appends the queued audit events to their labs' chains. Whatever throws, everything is
 * rolled back.
 *
 * @param writer in whose name audit events are written; null where there is no lab yet or none is concerned
 * @param options.study id of the study whose content changes; leave it out where only its state moves
 * @throws NotFound when the study is not in the writer's lab; Conflict when it is not open (draft or returned), or two
 *   transactions got into each other's way
 */
export async function inTransaction<Result>(
  writer: Writer | null,
  options: Readonly<{ study?: string | undefined }>,
  work: (transaction: Transaction) => Promise<Result>
): Promise<Result> {
  const running = openFrame();
  const enter = async (unit: Unit): Promise<Result> => {
    if (options.study !== undefined) {
      if (!writer) throw new Error('a study belongs to a lab: name the writer');
      await requireOpenStudy(writer.labId, options.study);
      unit.studies.set(options.study, writer.labId);
    }
    return frames.run({ unit, writer }, () => work(unit.transaction));
  };
  if (running) return enter(running.unit);

  try {
    return await sequelize.transaction(async (transaction) => {
      const unit: Unit = { transaction, events: [], studies: new Map(), open: true };
      const result = await enter(unit).finally(() => (unit.open = false));
      // In one order everywhere, so that two transactions cannot wait for each other.
      for (const [studyId, labId] of [...unit.studies].sort(([a], [b]) => (a < b ? -1 : 1))) {
        await raiseDataVersion(labId, studyId);
      }
      await appendAuditEvents(unit.events);
      return result;
    });
  } catch (error) {
    throw translated(error);
  }
}

/**
 * Queues one audit event of the running transaction, in the name of its writer. It is appended last, just before the commit.
 * @throws Error outside of `inTransaction`, or where that was given no writer
 */
export function audit(entry: AuditEntry): void {
  const frame = openFrame();
  if (!frame) throw new Error('audit events are written inside inTransaction');
  if (!frame.writer) throw new Error('an audit event needs a writer and a lab');
  const { labId, userId, name, accessKey } = frame.writer;
  const after = accessKey === undefined ? entry.after : withKey(entry.after, accessKey);
  frame.unit.events.push({ ...entry, after, labId, actorId: userId, actorName: name });
}

/** What a program did in a person's name says so. */
function withKey(after: unknown, accessKey: string): unknown {
  const isRecord = typeof after === 'object' && after !== null && !Array.isArray(after);
  return { ...(isRecord ? after : after === undefined || after === null ? {} : { value: after }), accessKey };
}

/** The running transaction, or null outside of one. */
export function runningTransaction(): Transaction | null {
  return openFrame()?.unit.transaction ?? null;
}

/**
 * The driver's connection of the running transaction, for what Sequelize cannot say (COPY, the job queue's own statements).
 * @throws Error outside of `inTransaction`
 */
export function transactionClient(): PoolClient {
  const transaction = runningTransaction();
  const client: unknown = transaction ? Reflect.get(transaction, 'connection') : null;
  if (!client) throw new Error('this needs a running transaction');
  return client as PoolClient;
}
