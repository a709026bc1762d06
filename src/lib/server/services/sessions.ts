import { QueryTypes } from 'sequelize';
import type { Actor } from '../../domain/actor';
import type { Role } from '../../domain/roles';
import type { LabChoice } from '../../views/people';
import { forgiveAttempt, spendAttempt } from '../auth/attempts';
import { isPassword } from '../auth/passwords';
import { User } from '../db/models/user';
import { sequelize } from '../db/sequelize';
import { Forbidden } from '../errors';

/** What a session carries; everything else is read anew at each request. */
export interface SessionClaims {
  readonly userId: string;
  /** Must be that of the user: it is raised when the password changes, and older sessions end. */
  readonly sessionVersion: number;
  readonly labId: string;
}

interface MemberRow {
  readonly name: string;
  readonly email: string;
  readonly role: Role;
  readonly labName: string;
  readonly labIsDemo: boolean;
}

/**
 * The member behind a session, with the role that holds now; null when the password changed since, the person
 * is no longer a member of that lab, or there is no such person.
 */
export async function memberOf({ userId, sessionVersion, labId }: SessionClaims): Promise<Actor | null> {
  const [row] = await sequelize.query<MemberRow>(
    `SELECT u.name, u.email, m.role, l.name AS "labName", l.is_demo AS "labIsDemo"
       FROM users u
       JOIN memberships m ON m.user_id = u.id AND m.lab_id = $3
       JOIN labs l ON l.id = m.lab_id
      WHERE u.id = $1 AND u.session_version = $2`,
    { bind: [userId, sessionVersion, labId], type: QueryTypes.SELECT }
  );
  return row ? { userId, labId, ...row } : null;
}

/** The labs a person belongs to, by name. */
async function labsOfUser(userId: string): Promise<readonly LabChoice[]> {
  return sequelize.query<LabChoice>(
    `SELECT l.id, l.name, l.is_demo AS "isDemo", m.role
       FROM memberships m JOIN labs l ON l.id = m.lab_id
      WHERE m.user_id = $1 ORDER BY l.name, l.id`,
    { bind: [userId], type: QueryTypes.SELECT }
  );
}

/** The labs the signed-in person can switch between. Anybody may know their own. */
export async function listOwnLabs(actor: Actor): Promise<readonly LabChoice[]> {
  return labsOfUser(actor.userId);
}

/** True when this instance holds a lab of invented data: then the sign-in page offers its accounts. */
export async function hasDemoLab(): Promise<boolean> {
  const found = await sequelize.query('SELECT 1 FROM labs WHERE is_demo LIMIT 1', {
    type: QueryTypes.SELECT
  });
  return found.length > 0;
}

/**
 * Checks an e-mail address and a password.
 * @param input.address network address that the attempt comes from
 * @param input.labId the lab to begin in, when the person belongs to it; otherwise the first by name
 * @returns what the session carries, or null when the two do not belong together
 * @throws TooManyRequests after too many attempts; Forbidden when the person belongs to no lab any more
 */
export async function checkSignIn(
  input: Readonly<{ email: string; password: string; address: string; labId?: string | undefined }>
): Promise<SessionClaims | null> {
  const attempt = { email: input.email, address: input.address };
  await spendAttempt('sign-in', attempt);
  const user = await User.findOne({ where: { email: input.email } });
  if (!(await isPassword(input.password, user?.passwordHash ?? null)) || user === null) return null;
  await forgiveAttempt('sign-in', attempt);
  const labs = await labsOfUser(user.id);
  const lab = labs.find(({ id }) => id === input.labId) ?? labs[0];
  if (!lab) {
    throw new Forbidden('This account belongs to no lab at present. A lab manager can invite you again.');
  }
  return { userId: user.id, sessionVersion: user.sessionVersion, labId: lab.id };
}
