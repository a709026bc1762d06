import { QueryTypes } from 'sequelize';
import { canonicalText, chainHash, chainStart, storable, type ChainedEvent } from './audit-chain';
import { sequelize } from './sequelize';

/** What happened, as a service says it. */
export interface AuditEntry {
  /** What was done, one word: created, changed, removed, stored, withdrawn, excluded, lifted, signed … */
  readonly action: string;
  /** What it was done to: study, variant, experiment … */
  readonly entity: string;
  readonly entityId?: string | null;
  readonly studyId?: string | null;
  /** One sentence for the history page, in the words of the trade. */
  readonly sentence: string;
  readonly before?: unknown;
  readonly after?: unknown;
  readonly reason?: string | null;
}

export interface QueuedAuditEvent extends AuditEntry {
  readonly labId: string;
  readonly actorId: string | null;
  readonly actorName: string;
}

/** Advisory locks with this first key guard one lab's chain each; the second key is a hash of the lab's id. */
const chainLock = 0x48574143;

async function append(labId: string, events: readonly QueuedAuditEvent[]): Promise<void> {
  await sequelize.query('SELECT pg_advisory_xact_lock($1::int, hashtext($2))', { bind: [chainLock, labId] });
  const [last] = await sequelize.query<{ seq: string; hash: string }>(
    'SELECT seq, hash FROM audit_events WHERE lab_id = $1 ORDER BY seq DESC LIMIT 1',
    { bind: [labId], type: QueryTypes.SELECT }
  );
  let seq = Number(last?.seq ?? 0);
  let previousHash = last?.hash ?? chainStart;
  const at = new Date().toISOString();
  for (const event of events) {
    seq += 1;
    const link: ChainedEvent = {
      labId,
      seq,
      studyId: event.studyId ?? null,
      actorId: event.actorId,
      actorName: storable(event.actorName) as string,
      action: event.action,
      entity: event.entity,
      entityId: event.entityId ?? null,
      sentence: storable(event.sentence) as string,
      before: storable(event.before ?? null),
      after: storable(event.after ?? null),
      reason: event.reason ? (storable(event.reason) as string) : null,
      at,
      previousHash
    };
    const hash = chainHash(link);
    const json = (value: unknown): string | null => (value === null ? null : canonicalText(value));
    await sequelize.query(
      `INSERT INTO audit_events (lab_id, seq, study_id, actor_id, actor_name, action, entity, entity_id, sentence,
         before, after, reason, at, previous_hash, hash)
       VALUES ($1, $2, $3, $4, $5, $6, $7, $8, $9, $10::jsonb, $11::jsonb, $12, $13, $14, $15)`,
      {
        bind: [
          link.labId,
          link.seq,
          link.studyId,
          link.actorId,
          link.actorName,
          link.action,
          link.entity,
          link.entityId,
          link.sentence,
          json(link.before),
          json(link.after),
          link.reason,
          link.at,
          link.previousHash,
          hash
        ]
      }
    );
    previousHash = hash;
  }
}

/**
 * Appends events to the chains of their labs, in the order given, inside the running transaction. Each chain is locked until
 * that transaction ends: call it as its last step.
 */
export async function appendAuditEvents(events: readonly QueuedAuditEvent[]): Promise<void> {
  const labs = [...new Set(events.map((event) => event.labId))].sort();
  for (const labId of labs) {
    await append(
      labId,
      events.filter((event) => event.labId === labId)
    );
  }
}
