import type { Actor } from '../../domain/actor';
import type { ResetState } from '../../views/people';
import { clearAttempts, forgiveAttempt, spendAttempt } from '../auth/attempts';
import { hashPassword, isPassword } from '../auth/passwords';
import { createToken, hashToken, isTokenShaped } from '../auth/tokens';
import { Membership } from '../db/models/membership';
import { PasswordReset } from '../db/models/password-reset';
import { User } from '../db/models/user';
import { audit, inTransaction } from '../db/transaction';
import { Conflict, Invalid, NotFound } from '../errors';
import { enqueue } from '../jobs/queue';
import { enqueueMail } from '../mail/enqueue-mail';
import { passwordResetJob } from '../mail/mail-jobs';
import { passwordResetMessage } from '../mail/password-reset-message';

const resetMinutes = 60;

/**
 * Stores a new password, ends every session that the person has, closes every open reset link, and notes the change
 * in each lab that the person belongs to. Runs inside a transaction that holds the user's row.
 */
async function storePassword(user: User, password: string, sentence: string): Promise<void> {
  await user.update({ passwordHash: await hashPassword(password), sessionVersion: user.sessionVersion + 1 });
  await PasswordReset.update({ usedAt: new Date() }, { where: { userId: user.id, usedAt: null } });
  const memberships = await Membership.findAll({ where: { userId: user.id } });
  for (const { labId } of memberships) {
    await inTransaction({ labId, userId: user.id, name: user.name }, {}, async () =>
      audit({ action: 'changed', entity: 'password', entityId: user.id, sentence })
    );
  }
}

/**
 * Changes one's own password. Every session ends, this one too: the caller signs the person in again.
 * @throws Invalid at `current` when the present password is another; TooManyRequests after too many tries
 */
export async function changeOwnPassword(
  actor: Actor,
  input: Readonly<{ current: string; password: string; address: string }>
): Promise<void> {
  const attempt = { email: actor.email, address: input.address };
  await spendAttempt('own-password', attempt);
  await inTransaction(actor, {}, async (transaction) => {
    const user = await User.findByPk(actor.userId, { lock: transaction.LOCK.UPDATE });
    if (!user) throw new NotFound();
    if (!(await isPassword(input.current, user.passwordHash))) {
      throw Invalid.at('current', 'This is not your present password.');
    }
    if (input.current === input.password) {
      throw Invalid.at('password', 'This is your present password. Choose another one.');
    }
    await storePassword(user, input.password, `${user.name} changed their password.`);
  });
  await forgiveAttempt('own-password', attempt);
}

/**
 * Takes down that somebody asks for a new password. Does the same for every address, so that neither the answer
 * nor its time tells whether there is an account.
 * @param input.origin what the link begins with, from `linkOrigin`
 * @throws TooManyRequests
 */
export async function requestPasswordReset(
  input: Readonly<{ email: string; address: string; origin: string }>
): Promise<void> {
  await spendAttempt('forgot-password', input);
  await inTransaction(null, {}, async (transaction) => {
    await enqueue(transaction, passwordResetJob, { email: input.email, origin: input.origin });
  });
}

/**
 * The later half of asking: writes to the address when it has an account. Bears being run twice.
 * @param id names the reset; the second run with the same one does nothing
 */
export async function issuePasswordReset(
  input: Readonly<{ id: string; email: string; origin: string }>
): Promise<void> {
  await inTransaction(null, {}, async (transaction) => {
    const user = await User.findOne({ where: { email: input.email } });
    if (!user || (await PasswordReset.findByPk(input.id))) return;
    const token = createToken();
    const expiresAt = new Date(Date.now() + resetMinutes * 60_000);
    await PasswordReset.create({
      id: input.id,
      userId: user.id,
      tokenHash: token.hash,
      expiresAt,
      usedAt: null
    });
    const link = `${input.origin}/reset-password/${token.secret}`;
    const message = passwordResetMessage({ name: user.name, link, expiresAt });
    await enqueueMail(transaction, {
      template: 'password reset',
      labId: null,
      recipient: user.email,
      message
    });
  });
}

const stateOf = (reset: PasswordReset): 'open' | 'used' | 'expired' =>
  reset.usedAt !== null ? 'used' : reset.expiresAt.getTime() <= Date.now() ? 'expired' : 'open';

/** What a reset link is good for. @throws NotFound for a link that was never given out */
export async function readPasswordReset(secret: string): Promise<ResetState> {
  const reset = isTokenShaped(secret)
    ? await PasswordReset.findOne({ where: { tokenHash: hashToken(secret) } })
    : null;
  const user = reset && (await User.findByPk(reset.userId));
  if (!reset || !user) throw new NotFound('This link is not one of ours. Was it copied whole?');
  const state = stateOf(reset);
  if (state !== 'open') return { state };
  return { state, email: user.email, name: user.name, expiresAt: reset.expiresAt.toISOString() };
}

/**
 * Sets a new password by a reset link, once. Ends every session of the person and lifts their sign-in limit.
 * @throws NotFound for an unknown link; Conflict for one that was used or is too old
 */
export async function resetPassword(input: Readonly<{ secret: string; password: string }>): Promise<void> {
  if (!isTokenShaped(input.secret)) throw new NotFound();
  const email = await inTransaction(null, {}, async (transaction) => {
    const reset = await PasswordReset.findOne({
      where: { tokenHash: hashToken(input.secret) },
      lock: transaction.LOCK.UPDATE
    });
    const user = reset && (await User.findByPk(reset.userId, { lock: transaction.LOCK.UPDATE }));
    if (!reset || !user) throw new NotFound();
    const state = stateOf(reset);
    if (state !== 'open')
      throw new Conflict(`This link was ${state === 'used' ? 'used already' : 'given too long ago'}.`);
    await storePassword(
      user,
      input.password,
      `${user.name} set a new password through a link sent by e-mail.`
    );
    return user.email;
  });
  await clearAttempts('sign-in', email);
}
