import { QueryTypes, type Transaction } from 'sequelize';
import type { Actor } from '../../domain/actor';
import { roleLabels, type Role } from '../../domain/roles';
import type { InvitationState, InvitationView } from '../../views/people';
import { forgiveAttempt, spendAttempt } from '../auth/attempts';
import { hashPassword, isPassword } from '../auth/passwords';
import { createToken, hashToken, isTokenShaped } from '../auth/tokens';
import { Invitation } from '../db/models/invitation';
import { Lab } from '../db/models/lab';
import { Membership } from '../db/models/membership';
import { User } from '../db/models/user';
import { sequelize } from '../db/sequelize';
import { audit, inTransaction } from '../db/transaction';
import { Conflict, Invalid, NotFound } from '../errors';
import { enqueueMail } from '../mail/enqueue-mail';
import { invitationMessage } from '../mail/invitation-message';
import { require } from './permissions';

const openDays = 7;

/** The invitations of the lab that nobody has answered, newest first. */
export async function listInvitations(actor: Actor): Promise<readonly InvitationView[]> {
  require(actor, 'members.manage');
  const rows = await sequelize.query<
    Omit<InvitationView, 'invitedAt' | 'expiresAt' | 'isExpired'> & { invitedAt: Date; expiresAt: Date }
  >(
    `SELECT i.id, i.email, i.role, u.name AS "invitedBy", i.created_at AS "invitedAt", i.expires_at AS "expiresAt"
       FROM invitations i JOIN users u ON u.id = i.invited_by
      WHERE i.lab_id = $1 AND i.accepted_at IS NULL AND i.revoked_at IS NULL
      ORDER BY i.created_at DESC, i.id DESC`,
    { bind: [actor.labId], type: QueryTypes.SELECT }
  );
  return rows.map((row) => ({
    ...row,
    invitedAt: row.invitedAt.toISOString(),
    expiresAt: row.expiresAt.toISOString(),
    isExpired: row.expiresAt.getTime() <= Date.now()
  }));
}

/**
 * Invites an address into the lab and writes to it. An open invitation to the same address is replaced: its link ends.
 * @param input.origin what the link begins with, from `linkOrigin`
 * @throws Invalid at `email` for somebody who is a member already
 */
export async function invite(
  actor: Actor,
  input: Readonly<{ email: string; role: Role; origin: string }>
): Promise<void> {
  require(actor, 'members.manage');
  await inTransaction(actor, {}, async (transaction) => {
    // One invitation at a time in a lab: two at once to the same address would meet in the unique index.
    await Lab.findByPk(actor.labId, { lock: transaction.LOCK.UPDATE });
    const user = await User.findOne({ where: { email: input.email } });
    const isMember = user && (await Membership.findOne({ where: { labId: actor.labId, userId: user.id } }));
    if (isMember) throw Invalid.at('email', `${user.name} (${input.email}) is a member of this lab already.`);
    const [replaced] = await Invitation.update(
      { revokedAt: new Date() },
      { where: { labId: actor.labId, email: input.email, acceptedAt: null, revokedAt: null } }
    );
    const token = createToken();
    const expiresAt = new Date(Date.now() + openDays * 24 * 60 * 60_000);
    const invitation = await Invitation.create({
      labId: actor.labId,
      email: input.email,
      role: input.role,
      tokenHash: token.hash,
      invitedBy: actor.userId,
      expiresAt,
      acceptedAt: null,
      revokedAt: null
    });
    const message = invitationMessage({
      labName: actor.labName,
      labIsDemo: actor.labIsDemo,
      invitedBy: actor.name,
      role: input.role,
      link: `${input.origin}/invitations/${token.secret}`,
      expiresAt
    });
    await enqueueMail(transaction, {
      template: 'invitation',
      labId: actor.labId,
      recipient: input.email,
      message
    });
    audit({
      action: 'invited',
      entity: 'invitation',
      entityId: invitation.id,
      sentence: `${input.email} is invited as ${roleLabels[input.role].toLowerCase()}${replaced > 0 ? '; the earlier invitation ends' : ''}.`,
      after: { email: input.email, role: input.role, expiresAt }
    });
  });
}

/** Ends an invitation that nobody has answered: its link stops working. */
export async function revokeInvitation(
  actor: Actor,
  input: Readonly<{ invitationId: string }>
): Promise<void> {
  require(actor, 'members.manage');
  await inTransaction(actor, {}, async (transaction) => {
    const invitation = await Invitation.findOne({
      where: { id: input.invitationId, labId: actor.labId },
      lock: transaction.LOCK.UPDATE
    });
    if (!invitation) throw new NotFound('There is no such invitation in this lab.');
    if (invitation.acceptedAt !== null) {
      throw new Conflict(`${invitation.email} has accepted in the meantime. Look among the members.`);
    }
    if (invitation.revokedAt !== null) return;
    await invitation.update({ revokedAt: new Date() });
    audit({
      action: 'revoked',
      entity: 'invitation',
      entityId: invitation.id,
      sentence: `The invitation to ${invitation.email} is revoked.`,
      before: { email: invitation.email, role: invitation.role }
    });
  });
}

type Standing = InvitationState['state'];

const standingOf = (invitation: Invitation): Standing =>
  invitation.acceptedAt !== null
    ? 'accepted'
    : invitation.revokedAt !== null
      ? 'revoked'
      : invitation.expiresAt.getTime() <= Date.now()
        ? 'expired'
        : 'open';

/** What an invitation's link is good for. @throws NotFound for a link that was never given out */
export async function readInvitation(secret: string): Promise<InvitationState> {
  const invitation = isTokenShaped(secret)
    ? await Invitation.findOne({ where: { tokenHash: hashToken(secret) } })
    : null;
  const lab = invitation && (await Lab.findByPk(invitation.labId));
  if (!invitation || !lab)
    throw new NotFound('This invitation is not one of ours. Was the link copied whole?');
  const state = standingOf(invitation);
  if (state !== 'open') return { state, labName: lab.name };
  const inviter = await User.findByPk(invitation.invitedBy);
  const account = await User.findOne({ where: { email: invitation.email } });
  return {
    state,
    email: invitation.email,
    role: invitation.role,
    labName: lab.name,
    labIsDemo: lab.isDemo,
    invitedBy: inviter?.name ?? 'A lab manager',
    expiresAt: invitation.expiresAt.toISOString(),
    hasAccount: account !== null
  };
}

/** The open invitation of a link, locked. @throws NotFound or Conflict otherwise */
async function lockOpen(secret: string, transaction: Transaction): Promise<Invitation> {
  const invitation = isTokenShaped(secret)
    ? await Invitation.findOne({ where: { tokenHash: hashToken(secret) }, lock: transaction.LOCK.UPDATE })
    : null;
  if (!invitation) throw new NotFound('This invitation is not one of ours. Was the link copied whole?');
  const state = standingOf(invitation);
  if (state !== 'open') throw new Conflict(`This invitation is ${state}.`);
  return invitation;
}

async function join(invitation: Invitation, user: User): Promise<void> {
  const { labId, role } = invitation;
  await invitation.update({ acceptedAt: new Date() });
  const existing = await Membership.findOne({ where: { labId, userId: user.id } });
  if (existing) throw new Conflict('This account is a member of the lab already.');
  await Membership.create({ labId, userId: user.id, role });
  await inTransaction({ labId, userId: user.id, name: user.name }, {}, async () =>
    audit({
      action: 'joined',
      entity: 'member',
      entityId: user.id,
      sentence: `${user.name} (${user.email}) joined the lab as ${roleLabels[role].toLowerCase()}.`,
      after: { role, name: user.name, email: user.email }
    })
  );
}

/** Who has joined, and where. */
export interface Joined {
  readonly email: string;
  readonly labId: string;
}

/**
 * Accepts an invitation by making an account with this name and password.
 * @throws NotFound, Conflict when the link is not open or the address has an account meanwhile
 */
export async function acceptAsNewPerson(
  input: Readonly<{ secret: string; name: string; password: string }>
): Promise<Joined> {
  const passwordHash = await hashPassword(input.password);
  return inTransaction(null, {}, async (transaction) => {
    const invitation = await lockOpen(input.secret, transaction);
    const { email, labId } = invitation;
    if (await User.findOne({ where: { email } })) {
      throw new Conflict(`${email} has an account by now. Open the link again to join with its password.`);
    }
    const user = await User.create({ email, name: input.name, passwordHash });
    await join(invitation, user);
    return { email, labId };
  });
}

/**
 * Accepts an invitation with the account that its address has. The password is asked for unless the person is signed in as it.
 * @throws Invalid at `password`; TooManyRequests; NotFound, Conflict when the link is not open
 */
export async function acceptWithAccount(
  actor: Actor | null,
  input: Readonly<{ secret: string; password: string; address: string }>
): Promise<Joined> {
  const state = await readInvitation(input.secret);
  if (state.state !== 'open') throw new Conflict(`This invitation is ${state.state}.`);
  const isSelf = actor?.email === state.email;
  const attempt = { email: state.email, address: input.address };
  if (!isSelf) await spendAttempt('sign-in', attempt);
  const joined = await inTransaction(null, {}, async (transaction) => {
    const invitation = await lockOpen(input.secret, transaction);
    const user = await User.findOne({ where: { email: invitation.email } });
    if (!user) throw new Conflict('This address has no account. Open the link again to make one.');
    if (!isSelf && !(await isPassword(input.password, user.passwordHash))) {
      throw Invalid.at('password', 'This is not the password of the account.');
    }
    await join(invitation, user);
    return { email: user.email, labId: invitation.labId };
  });
  if (!isSelf) await forgiveAttempt('sign-in', attempt);
  return joined;
}
