import { describe, expect, it } from 'vitest';
import { PasswordReset } from '../../../src/lib/server/db/models/password-reset';
import { User } from '../../../src/lib/server/db/models/user';
import { issuePasswordReset } from '../../../src/lib/server/services/passwords';
import { createToken, hashToken } from '../../../src/lib/server/auth/tokens';
import { TestBrowser } from './browser';
import { pages } from './pages';
import { auditOf, makePerson, password, queuedJobs, secretSentTo, signedIn } from './people';

const fresh = 'brown otters dive';
const both = { password: fresh, again: fresh };

describe('changing one’s own password', () => {
  it('ends the sessions in other browsers with their next request, and keeps this one', async () => {
    const person = await makePerson();
    const [here, elsewhere] = [await signedIn(person), await signedIn(person)];
    expect(await pages.whoAmI(elsewhere)).toEqual(person);
    const answer = await pages.account(here, 'password', { current: password, ...both });
    expect(answer).toMatchObject({ status: 303, location: '/account?after=password' });
    expect(await pages.whoAmI(elsewhere)).toBeNull();
    expect(await pages.whoAmI(here)).toEqual(person);
    expect((await pages.signIn(new TestBrowser(), { email: person.email, password })).status).toBe(400);
    expect((await pages.signIn(new TestBrowser(), { email: person.email, password: fresh })).status).toBe(
      303
    );
  });

  it('is noted in the history without any password', async () => {
    const person = await makePerson({ name: 'Ada Rill' });
    await pages.account(await signedIn(person), 'password', { current: password, ...both });
    const events = await auditOf(person.labId);
    expect(events).toEqual([
      {
        action: 'changed',
        entity: 'password',
        sentence: 'Ada Rill changed their password.',
        actorName: 'Ada Rill'
      }
    ]);
    expect(JSON.stringify(events)).not.toContain(fresh);
  });

  it('needs the present one, and changes nothing without it', async () => {
    const person = await makePerson();
    const browser = await signedIn(person);
    const answer = await pages.account(browser, 'password', { current: 'something else', ...both });
    expect(answer.data).toMatchObject({
      data: { errors: { current: 'This is not your present password.' } }
    });
    expect(JSON.stringify(answer.data)).not.toContain(fresh);
    expect(await pages.whoAmI(browser)).toEqual(person);
    expect((await pages.signIn(new TestBrowser(), { email: person.email, password })).status).toBe(303);
  });

  it('is limited, so that nobody guesses at an open session', async () => {
    const person = await makePerson();
    const browser = await signedIn(person);
    for (let i = 0; i < 10; i += 1)
      await pages.account(browser, 'password', { current: 'something else', ...both });
    expect((await pages.account(browser, 'password', { current: password, ...both })).status).toBe(429);
  });
});

describe('a forgotten password', () => {
  async function askFor(email: string): Promise<string | null> {
    await pages.forgot(new TestBrowser(), email);
    const job = (await queuedJobs('password-reset.issue')).find(({ data }) => data.email === email);
    await issuePasswordReset({ id: job!.id, email, origin: job!.data.origin! });
    return secretSentTo(email);
  }

  it('is answered alike, and does the same in the database, for an address with an account and one without', async () => {
    const person = await makePerson();
    const known = await pages.forgot(new TestBrowser(), person.email);
    const unknown = await pages.forgot(new TestBrowser(), 'nobody@lab.test');
    expect(known).toEqual({ status: 200, location: null, data: { sentTo: person.email } });
    expect(unknown).toEqual({ status: 200, location: null, data: { sentTo: 'nobody@lab.test' } });
    const asked = (await queuedJobs('password-reset.issue')).map(({ data }) => data.email);
    expect(asked).toEqual(expect.arrayContaining([person.email, 'nobody@lab.test']));
    expect(await PasswordReset.count({ where: { userId: person.userId } })).toBe(0);
  });

  it('sends nothing to an address without an account', async () => {
    expect(await askFor('stranger@lab.test')).toBeNull();
  });

  it('sends a link that sets a new one, once, ends all sessions and lifts the limit', async () => {
    const person = await makePerson();
    const open = await signedIn(person);
    for (let i = 0; i < 11; i += 1)
      await pages.signIn(new TestBrowser(), { email: person.email, password: 'wrong' });
    const secret = (await askFor(person.email))!;
    const browser = new TestBrowser();
    expect((await pages.openReset(browser, secret)).data).toMatchObject({
      reset: { state: 'open', email: person.email }
    });
    expect(await pages.reset(browser, secret, both)).toMatchObject({
      status: 303,
      location: '/sign-in?after=reset'
    });
    expect(await pages.whoAmI(open)).toBeNull();
    expect((await pages.signIn(browser, { email: person.email, password: fresh })).status).toBe(303);
    const again = await pages.reset(browser, secret, {
      password: 'red squirrels run',
      again: 'red squirrels run'
    });
    expect(again.status).toBe(409);
    expect((await pages.openReset(browser, secret)).data).toMatchObject({ reset: { state: 'used' } });
    expect(await auditOf(person.labId)).toMatchObject([{ entity: 'password', actorName: person.name }]);
  });

  it('lets an older link go once a newer one was used', async () => {
    const person = await makePerson();
    const older = (await askFor(person.email))!;
    await issuePasswordReset({
      id: '01999999-0000-7000-8000-000000000001',
      email: person.email,
      origin: 'http://localhost:3000'
    });
    const newer = (await secretSentTo(person.email))!;
    expect(newer).not.toBe(older);
    await pages.reset(new TestBrowser(), newer, both);
    expect((await pages.reset(new TestBrowser(), older, both)).status).toBe(409);
  });

  it('keeps the rule for passwords, and what was typed wrong leaves the link alive', async () => {
    const person = await makePerson();
    const secret = (await askFor(person.email))!;
    const short = await pages.reset(new TestBrowser(), secret, { password: 'short', again: 'short' });
    expect(short.data).toMatchObject({
      data: { errors: { password: expect.stringContaining('at least 12') } }
    });
    const own = await pages.reset(new TestBrowser(), secret, { password: person.email, again: person.email });
    expect(own.status).toBe(400);
    expect((await pages.reset(new TestBrowser(), secret, both)).status).toBe(303);
  });

  it('has a link for an hour', async () => {
    const person = await makePerson();
    const secret = (await askFor(person.email))!;
    await PasswordReset.update(
      { expiresAt: new Date(Date.now() - 1000) },
      { where: { tokenHash: hashToken(secret) } }
    );
    expect((await pages.openReset(new TestBrowser(), secret)).data).toEqual({ reset: { state: 'expired' } });
    expect((await pages.reset(new TestBrowser(), secret, both)).status).toBe(409);
    expect((await User.findByPk(person.userId))?.sessionVersion).toBe(1);
  });

  it('knows no link that it did not give out', async () => {
    expect((await pages.openReset(new TestBrowser(), createToken().secret)).status).toBe(404);
    expect((await pages.reset(new TestBrowser(), 'nonsense', both)).status).toBe(404);
  });

  it('keeps only the hash of a link', async () => {
    const person = await makePerson();
    const secret = (await askFor(person.email))!;
    const row = await PasswordReset.findOne({ where: { userId: person.userId } });
    expect(row?.tokenHash).toBe(hashToken(secret));
    expect(JSON.stringify(row)).not.toContain(secret);
  });

  it('writes once though its job runs twice', async () => {
    const person = await makePerson();
    const job = {
      id: '01999999-0000-7000-8000-000000000002',
      email: person.email,
      origin: 'http://localhost:3000'
    };
    await issuePasswordReset(job);
    await issuePasswordReset(job);
    expect(await PasswordReset.count({ where: { userId: person.userId } })).toBe(1);
  });

  it('is limited for each address', async () => {
    const email = 'impatient@lab.test';
    for (let i = 0; i < 4; i += 1) expect((await pages.forgot(new TestBrowser(), email)).status).toBe(200);
    expect((await pages.forgot(new TestBrowser(), email)).status).toBe(429);
  });
});
