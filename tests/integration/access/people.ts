import { QueryTypes } from 'sequelize';
import type { Actor } from '../../../src/lib/domain/actor';
import type { Role } from '../../../src/lib/domain/roles';
import { hashPassword } from '../../../src/lib/server/auth/passwords';
import type { Lab } from '../../../src/lib/server/db/models/lab';
import { sequelize } from '../../../src/lib/server/db/sequelize';
import { makeMember } from '../../factories/member';
import { TestBrowser } from './browser';
import { pages } from './pages';

export const password = 'grey herons wade';

/** A member who can sign in with `password`. */
export async function makePerson(
  overrides: Readonly<Partial<{ lab: Lab; role: Role; name: string; email: string }>> = {}
): Promise<Actor> {
  return makeMember({ ...overrides, passwordHash: await hashPassword(password) });
}

/** A browser in which the person is signed in. */
export async function signedIn(person: Actor): Promise<TestBrowser> {
  const browser = new TestBrowser();
  await pages.signIn(browser, { email: person.email, password });
  return browser;
}

interface AuditRow {
  readonly action: string;
  readonly entity: string;
  readonly sentence: string;
  readonly actorName: string;
}

/** The audit events of a lab, oldest first. */
export async function auditOf(labId: string): Promise<readonly AuditRow[]> {
  return sequelize.query<AuditRow>(
    'SELECT action, entity, sentence, actor_name AS "actorName" FROM audit_events WHERE lab_id = $1 ORDER BY seq',
    { bind: [labId], type: QueryTypes.SELECT }
  );
}

/** The secret at the end of the newest link that was put into the outbox for an address; null when there is none. */
export async function secretSentTo(email: string): Promise<string | null> {
  const [row] = await sequelize.query<{ body_text: string }>(
    'SELECT body_text FROM outbox_messages WHERE recipient = $1 ORDER BY created_at DESC, id DESC LIMIT 1',
    { bind: [email], type: QueryTypes.SELECT }
  );
  return /\/(?:reset-password|invitations)\/([A-Za-z0-9_-]{43})\s/.exec(row?.body_text ?? '')?.[1] ?? null;
}

interface QueuedJob {
  readonly id: string;
  readonly name: string;
  readonly data: Readonly<Record<string, string>>;
}

/** What waits in the queue, oldest first. */
export async function queuedJobs(name: string): Promise<readonly QueuedJob[]> {
  return sequelize.query<QueuedJob>(
    'SELECT id, name, data FROM job_queue.job WHERE name = $1 ORDER BY created_on, id',
    { bind: [name], type: QueryTypes.SELECT }
  );
}
