import { describe, expect, it } from 'vitest';
import { createToken, hashToken } from '../../../src/lib/server/auth/tokens';
import { Invitation } from '../../../src/lib/server/db/models/invitation';
import { Membership } from '../../../src/lib/server/db/models/membership';
import { OutboxMessage } from '../../../src/lib/server/db/models/outbox-message';
import { User } from '../../../src/lib/server/db/models/user';
import { acceptAsNewPerson, invite } from '../../../src/lib/server/services/invitations';
import { TestBrowser } from './browser';
import { pages } from './pages';
import { auditOf, makePerson, password, secretSentTo, signedIn } from './people';

const newcomer = { name: 'Nia Rill', password: 'brown otters dive', again: 'brown otters dive' };
let count = 0;
const newAddress = (): string => `newcomer-${(count += 1)}@lab.test`;

async function invited(email: string) {
  const manager = await makePerson({ role: 'manager', name: 'Greta Weir' });
  const browser = await signedIn(manager);
  const answer = await pages.manage(browser, 'invite', { email, role: 'analyst' });
  return { manager, browser, answer, secret: (await secretSentTo(email.toLowerCase()))! };
}

describe('an invitation', () => {
  it('brings a newcomer into the lab, in the role that was named, signed in', async () => {
    const email = newAddress();
    const { manager, answer, secret } = await invited(email);
    expect(answer).toMatchObject({ status: 303, location: '/lab/members?after=invited' });
    const browser = new TestBrowser();
    expect((await pages.openInvitation(browser, secret)).data).toMatchObject({
      invitation: { state: 'open', email, role: 'analyst', hasAccount: false, invitedBy: 'Greta Weir' },
      isSignedIn: false
    });
    expect(await pages.accept(browser, secret, 'create', newcomer)).toMatchObject({
      status: 303,
      location: '/'
    });
    expect(await pages.whoAmI(browser)).toMatchObject({
      email,
      name: 'Nia Rill',
      role: 'analyst',
      labId: manager.labId
    });
    expect((await auditOf(manager.labId)).map(({ sentence, actorName }) => [sentence, actorName])).toEqual([
      [`${email} is invited as analyst.`, 'Greta Weir'],
      [`Nia Rill (${email}) joined the lab as analyst.`, 'Nia Rill']
    ]);
  });

  it('works once', async () => {
    const { secret } = await invited(newAddress());
    await pages.accept(new TestBrowser(), secret, 'create', newcomer);
    expect((await pages.openInvitation(new TestBrowser(), secret)).data).toMatchObject({
      invitation: { state: 'accepted' }
    });
    expect((await pages.accept(new TestBrowser(), secret, 'create', newcomer)).status).toBe(409);
  });

  it('accepted twice at the same moment makes one account', async () => {
    const email = newAddress();
    const { secret } = await invited(email);
    const input = { secret, name: 'Nia Rill', password: newcomer.password };
    const results = await Promise.allSettled([acceptAsNewPerson(input), acceptAsNewPerson(input)]);
    expect(results.map(({ status }) => status).sort()).toEqual(['fulfilled', 'rejected']);
    expect(await User.count({ where: { email } })).toBe(1);
  });

  it('keeps the name and says what is wrong with the password', async () => {
    const { secret } = await invited(newAddress());
    const answer = await pages.accept(new TestBrowser(), secret, 'create', {
      ...newcomer,
      again: 'another one here'
    });
    expect(answer.data).toMatchObject({
      data: { values: { name: 'Nia Rill' }, errors: { again: expect.stringContaining('differ') } }
    });
    expect((await pages.openInvitation(new TestBrowser(), secret)).data).toMatchObject({
      invitation: { state: 'open' }
    });
  });

  it('lets somebody with an account join with its password only', async () => {
    const person = await makePerson({ role: 'chemist' });
    const { manager, secret } = await invited(person.email);
    expect((await pages.openInvitation(new TestBrowser(), secret)).data).toMatchObject({
      invitation: { hasAccount: true }
    });
    const wrong = await pages.accept(new TestBrowser(), secret, 'join', { password: 'something else' });
    expect(wrong.data).toMatchObject({ data: { errors: { password: expect.any(String) } } });
    const taken = await pages.accept(new TestBrowser(), secret, 'create', newcomer);
    expect(taken.status).toBe(409);
    const browser = new TestBrowser();
    expect(await pages.accept(browser, secret, 'join', { password })).toMatchObject({ status: 303 });
    expect(await pages.whoAmI(browser)).toMatchObject({ labId: manager.labId, role: 'analyst' });
    expect(await Membership.count({ where: { userId: person.userId } })).toBe(2);
  });

  it('asks who is signed in as the invited person for nothing more, and nobody else is taken for them', async () => {
    const person = await makePerson({ role: 'chemist' });
    const { manager, secret } = await invited(person.email);
    const other = await signedIn(await makePerson());
    expect((await pages.accept(other, secret, 'join', {})).status).toBe(400);
    const browser = await signedIn(person);
    expect((await pages.accept(browser, secret, 'join', {})).status).toBe(303);
    expect(await pages.whoAmI(browser)).toMatchObject({ labId: manager.labId });
  });

  it('brings back somebody who belonged to no lab any more', async () => {
    const person = await makePerson();
    await Membership.destroy({ where: { userId: person.userId } });
    const { manager, secret } = await invited(person.email);
    const browser = new TestBrowser();
    await pages.accept(browser, secret, 'join', { password });
    expect(await pages.whoAmI(browser)).toMatchObject({ labId: manager.labId });
  });

  it('ends when it is revoked', async () => {
    const email = newAddress();
    const { manager, browser, secret } = await invited(email);
    const invitation = await Invitation.findOne({ where: { email } });
    await pages.manage(browser, 'revoke', { invitationId: invitation!.id });
    expect((await pages.openInvitation(new TestBrowser(), secret)).data).toMatchObject({
      invitation: { state: 'revoked' }
    });
    expect((await pages.accept(new TestBrowser(), secret, 'create', newcomer)).status).toBe(409);
    expect((await auditOf(manager.labId)).at(-1)?.sentence).toBe(`The invitation to ${email} is revoked.`);
  });

  it('ends after seven days', async () => {
    const { secret } = await invited(newAddress());
    const row = await Invitation.findOne({ where: { tokenHash: hashToken(secret) } });
    const days = (row!.expiresAt.getTime() - Date.now()) / 86_400_000;
    expect(days).toBeGreaterThan(6.9);
    expect(days).toBeLessThanOrEqual(7);
    await row!.update({ expiresAt: new Date(Date.now() - 1000) });
    expect((await pages.accept(new TestBrowser(), secret, 'create', newcomer)).status).toBe(409);
  });

  it('is replaced by a second one to the same address', async () => {
    const email = newAddress();
    const { browser, secret } = await invited(email);
    await pages.manage(browser, 'invite', { email: email.toUpperCase(), role: 'chemist' });
    const second = (await secretSentTo(email))!;
    expect(second).not.toBe(secret);
    expect((await pages.accept(new TestBrowser(), secret, 'create', newcomer)).status).toBe(409);
    expect((await pages.accept(new TestBrowser(), second, 'create', newcomer)).status).toBe(303);
  });

  it('is not for a member', async () => {
    const manager = await makePerson({ role: 'manager', name: 'Greta Weir' });
    const answer = await pages.manage(await signedIn(manager), 'invite', {
      email: manager.email,
      role: 'analyst'
    });
    expect(answer.data).toMatchObject({
      data: { errors: { email: `Greta Weir (${manager.email}) is a member of this lab already.` } }
    });
  });

  it('cannot be revoked from another lab, nor found by guessing', async () => {
    const email = newAddress();
    await invited(email);
    const invitation = await Invitation.findOne({ where: { email } });
    const foreign = await signedIn(await makePerson({ role: 'manager' }));
    expect((await pages.manage(foreign, 'revoke', { invitationId: invitation!.id })).status).toBe(404);
    expect((await pages.openInvitation(new TestBrowser(), createToken().secret)).status).toBe(404);
  });

  it('sends nothing when it comes to nothing', async () => {
    const manager = await makePerson({ role: 'manager' });
    const email = newAddress();
    const input = { email, role: 'no such role' as 'analyst', origin: 'http://localhost:3000' };
    await expect(invite(manager, input)).rejects.toThrow();
    expect(await OutboxMessage.count({ where: { recipient: email } })).toBe(0);
    expect(await auditOf(manager.labId)).toEqual([]);
  });
});
