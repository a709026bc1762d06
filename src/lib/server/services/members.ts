import { QueryTypes, type Transaction } from 'sequelize';
import type { Actor } from '../../domain/actor';
import { roleLabels, type Role } from '../../domain/roles';
import type { MemberView } from '../../views/people';
import { Membership } from '../db/models/membership';
import { User } from '../db/models/user';
import { sequelize } from '../db/sequelize';
import { audit, inTransaction } from '../db/transaction';
import { Conflict, NotFound } from '../errors';
import { require } from './permissions';

/** Everybody in the lab, by name. */
export async function listMembers(actor: Actor): Promise<readonly MemberView[]> {
  require(actor, 'studies.see');
  const rows = await sequelize.query<Omit<MemberView, 'since'> & { since: Date }>(
    `SELECT u.id AS "userId", u.name, u.email, m.role, m.created_at AS since
       FROM memberships m JOIN users u ON u.id = m.user_id
      WHERE m.lab_id = $1 ORDER BY lower(u.name), u.id`,
    { bind: [actor.labId], type: QueryTypes.SELECT }
  );
  return rows.map((row) => ({ ...row, since: row.since.toISOString() }));
}

interface Found {
  readonly membership: Membership;
  readonly user: User;
  /** There is no other manager in the lab. */
  readonly isLastManager: boolean;
}

/** The membership, with all of the lab's managers locked, so that two managers cannot demote each other at once. */
async function lockMember(actor: Actor, userId: string, transaction: Transaction): Promise<Found> {
  const locked = await Membership.findAll({
    where: { labId: actor.labId },
    order: [['userId', 'ASC']],
    lock: transaction.LOCK.UPDATE
  });
  const membership = locked.find((row) => row.userId === userId);
  const user = membership && (await User.findByPk(userId));
  if (!membership || !user) throw new NotFound('There is no such member in this lab.');
  const others = locked.filter((row) => row.role === 'manager' && row.userId !== userId);
  return { membership, user, isLastManager: membership.role === 'manager' && others.length === 0 };
}

/** Changes what a member may do, from their next request on. @throws Conflict for the last manager */
export async function changeRole(
  actor: Actor,
  input: Readonly<{ userId: string; role: Role }>
): Promise<void> {
  require(actor, 'members.manage');
  await inTransaction(actor, {}, async (transaction) => {
    const { membership, user, isLastManager } = await lockMember(actor, input.userId, transaction);
    const before = membership.role;
    if (before === input.role) return;
    if (isLastManager) {
      throw new Conflict(`${user.name} is the only lab manager. Make somebody else a manager first.`);
    }
    await membership.update({ role: input.role });
    audit({
      action: 'changed',
      entity: 'member',
      entityId: user.id,
      sentence: `${user.name} is now ${roleLabels[input.role].toLowerCase()} (before: ${roleLabels[before].toLowerCase()}).`,
      before: { role: before },
      after: { role: input.role }
    });
  });
}

/**
 * Ends a membership from the next request on. The account and all that the person entered stay.
 * @throws Conflict for the last manager
 */
export async function removeMember(actor: Actor, input: Readonly<{ userId: string }>): Promise<void> {
  require(actor, 'members.manage');
  await inTransaction(actor, {}, async (transaction) => {
    const { membership, user, isLastManager } = await lockMember(actor, input.userId, transaction);
    if (isLastManager) {
      throw new Conflict(`${user.name} is the only lab manager. Make somebody else a manager first.`);
    }
    const { role } = membership;
    await membership.destroy();
    audit({
      action: 'removed',
      entity: 'member',
      entityId: user.id,
      sentence: `${user.name} (${user.email}) is no longer a member of the lab.`,
      before: { role, name: user.name, email: user.email }
    });
  });
}

/** Changes one's own name; the history keeps the old one beside what was done under it. */
export async function changeOwnName(actor: Actor, input: Readonly<{ name: string }>): Promise<void> {
  await inTransaction(actor, {}, async (transaction) => {
    const user = await User.findByPk(actor.userId, { lock: transaction.LOCK.UPDATE });
    if (!user) throw new NotFound();
    const before = user.name;
    if (before === input.name) return;
    await user.update({ name: input.name });
    const memberships = await Membership.findAll({ where: { userId: user.id } });
    for (const { labId } of memberships) {
      await inTransaction({ labId, userId: user.id, name: before }, {}, async () =>
        audit({
          action: 'changed',
          entity: 'member',
          entityId: user.id,
          sentence: `${before} is now called ${input.name}.`,
          before: { name: before },
          after: { name: input.name }
        })
      );
    }
  });
}
