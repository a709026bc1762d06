import { afterEach, beforeAll, describe, expect, it, vi } from 'vitest';
import type { Actor } from '../../../src/lib/domain/actor';
import { sequelize } from '../../../src/lib/server/db/sequelize';
import { Membership } from '../../../src/lib/server/db/models/membership';
import { makeLab } from '../../factories/lab';
import { TestBrowser } from './browser';
import { pages } from './pages';
import { makePerson, password, signedIn } from './people';

describe('signing in', () => {
  let person: Actor;
  beforeAll(async () => {
    person = await makePerson({ role: 'analyst' });
  });

  it('with address and password leads to the page that was asked for', async () => {
    const browser = new TestBrowser();
    const answer = await pages.signIn(browser, { email: person.email, password, next: '/studies?q=1' });
    expect(answer).toMatchObject({ status: 303, location: '/studies?q=1' });
    expect(await pages.whoAmI(browser)).toEqual(person);
  });

  it('takes the address in capitals', async () => {
    const answer = await pages.signIn(new TestBrowser(), { email: person.email.toUpperCase(), password });
    expect(answer).toMatchObject({ status: 303, location: '/' });
  });

  it('never leads to another host', async () => {
    const form = {
      email: person.email,
      password,
      next: '//elsewhere.test/',
      redirectTo: 'https://elsewhere.test'
    };
    expect((await pages.signIn(new TestBrowser(), form)).location).toBe('/');
  });

  it('with a wrong password is refused in the same words as with an unknown address', async () => {
    const browser = new TestBrowser();
    const wrong = await pages.signIn(browser, { email: person.email, password: 'brown herons wade' });
    const unknown = await pages.signIn(browser, { email: 'nobody@lab.test', password: 'brown herons wade' });
    expect(wrong.status).toBe(400);
    const sentence = 'This address and this password do not belong together.';
    expect(wrong.data).toMatchObject({ data: { errors: { password: sentence } } });
    expect(unknown.data).toMatchObject({ data: { errors: { password: sentence } } });
    expect(browser.cookies.size).toBe(0);
    expect(await pages.whoAmI(browser)).toBeNull();
  });

  it('gives the address back after a mistake, and never the password', async () => {
    const answer = await pages.signIn(new TestBrowser(), {
      email: 'not an address',
      password: 'brown herons wade'
    });
    expect(answer.data).toMatchObject({ data: { values: { email: 'not an address' } } });
    expect(JSON.stringify(answer.data)).not.toContain('brown herons wade');
  });

  it('ends in this browser by signing out', async () => {
    const browser = await signedIn(person);
    expect(await pages.signOut(browser)).toMatchObject({ status: 303, location: '/sign-in' });
    expect(await pages.whoAmI(browser)).toBeNull();
  });

  it('is asked of a stranger, and leads back afterwards', async () => {
    const answer = await new TestBrowser().visit(
      { routeId: '/(app)/account', path: '/account?a=1' },
      () => null
    );
    expect(answer).toMatchObject({ status: 303, location: '/sign-in?next=%2Faccount%3Fa%3D1' });
  });

  it('does not trust a cookie that was tampered with', async () => {
    const browser = await signedIn(person);
    for (const [name, value] of browser.cookies) browser.cookies.set(name, `${value.slice(0, -4)}AAAA`);
    expect(await pages.whoAmI(browser)).toBeNull();
    expect(browser.cookies.size).toBe(0);
  });
});

describe('too many attempts', () => {
  it('at one address are stopped, the right password too, and say how long to wait', async () => {
    const person = await makePerson();
    const tries = Array.from({ length: 10 }, () =>
      pages.signIn(new TestBrowser(), { email: person.email, password: 'wrong' }, '203.0.113.5')
    );
    expect((await Promise.all(tries)).map(({ status }) => status)).toEqual(Array(10).fill(400));
    const right = await pages.signIn(new TestBrowser(), { email: person.email, password }, '198.51.100.7');
    expect(right.status).toBe(429);
    expect(right.data).toMatchObject({
      data: { message: expect.stringMatching(/^Too many attempts. Try again in \d+ min/) }
    });
  });

  it('do not count once the right password was given', async () => {
    const person = await makePerson();
    for (let round = 0; round < 3; round += 1) {
      for (let i = 0; i < 6; i += 1)
        await pages.signIn(new TestBrowser(), { email: person.email, password: 'wrong' });
      expect((await pages.signIn(new TestBrowser(), { email: person.email, password })).status).toBe(303);
    }
  });

  it('from one network are stopped whatever the account', async () => {
    const person = await makePerson();
    const guess = (address: string) =>
      pages.signIn(
        new TestBrowser(),
        { email: `guess-${address.at(-1)}@lab.test`, password: 'wrong' },
        address
      );
    expect((await guess('2001:db8:1:2::1')).status).toBe(400);
    await sequelize.query(
      "UPDATE attempt_limits SET points = 99 WHERE key LIKE 'sign-in-perAddress%' AND points = 1"
    );
    expect((await guess('2001:db8:1:2::2')).status).toBe(400);
    expect((await guess('2001:db8:1:2:abcd::3')).status).toBe(429);
    const same = await pages.signIn(
      new TestBrowser(),
      { email: person.email, password },
      '2001:db8:1:2:ffff::1'
    );
    expect(same.status).toBe(429);
    const other = await pages.signIn(new TestBrowser(), { email: person.email, password }, '2001:db8:1:3::1');
    expect(other.status).toBe(303);
  });

  it('leave no address in the table', async () => {
    const person = await makePerson();
    await pages.signIn(new TestBrowser(), { email: person.email, password: 'wrong' });
    const [rows] = await sequelize.query('SELECT key FROM attempt_limits');
    expect(JSON.stringify(rows)).not.toContain(person.email);
    expect(rows.length).toBeGreaterThan(0);
  });
});

describe('somebody in several labs', () => {
  it('begins in the first by name, switches, and sees only the lab they are in', async () => {
    const first = await makeLab({ name: 'Alder Laboratory' });
    const second = await makeLab({ name: 'Birch Laboratory' });
    const person = await makePerson({ lab: second, role: 'manager' });
    await Membership.create({ labId: first.id, userId: person.userId, role: 'reviewer' });
    const browser = await signedIn(person);
    expect(await pages.whoAmI(browser)).toMatchObject({ labId: first.id, role: 'reviewer' });
    expect(await pages.switchLab(browser, second.id)).toMatchObject({ status: 303, location: '/' });
    expect(await pages.whoAmI(browser)).toMatchObject({ labId: second.id, role: 'manager' });
  });

  it('stays where they are when they name a lab that is not theirs', async () => {
    const person = await makePerson();
    const foreign = await makeLab();
    const browser = await signedIn(person);
    await pages.switchLab(browser, foreign.id);
    expect(await pages.whoAmI(browser)).toMatchObject({ labId: person.labId });
    expect((await pages.switchLab(browser, 'nonsense')).status).toBe(400);
  });

  it('is told when they belong to none', async () => {
    const person = await makePerson();
    await Membership.destroy({ where: { userId: person.userId } });
    const answer = await pages.signIn(new TestBrowser(), { email: person.email, password });
    expect(answer.status).toBe(403);
    expect(answer.data).toMatchObject({ data: { message: expect.stringContaining('belongs to no lab') } });
  });
});

describe('the cookie of a session', () => {
  afterEach(() => {
    vi.useRealTimers();
  });

  it('is renewed while it is used, and ends after half a day without', async () => {
    const person = await makePerson();
    const browser = await signedIn(person);
    const first = [...browser.cookies];
    const hours = (count: number) =>
      vi.useFakeTimers({ toFake: ['Date'], now: Date.now() + count * 3_600_000 });
    hours(7);
    expect(await pages.whoAmI(browser)).toEqual(person);
    expect([...browser.cookies]).not.toEqual(first);
    hours(7);
    expect(await pages.whoAmI(browser)).toEqual(person);
    hours(13);
    expect(await pages.whoAmI(browser)).toBeNull();
    expect(browser.cookies.size).toBe(0);
  });

  it('is not written anew with every answer, so that a slow one cannot undo a faster one', async () => {
    const person = await makePerson();
    const browser = await signedIn(person);
    const before = [...browser.cookies];
    await pages.openStart(browser);
    expect([...browser.cookies]).toEqual(before);
  });

  it('is Secure only over https, whatever the host', async () => {
    const person = await makePerson();
    const plain = new TestBrowser('http://notes.lab.test:3000');
    await pages.signIn(plain, { email: person.email, password });
    expect([...plain.written]).toEqual([
      [
        'authjs.session-token',
        expect.objectContaining({ secure: false, httpOnly: true, sameSite: 'lax', path: '/' })
      ]
    ]);
    const safe = new TestBrowser('https://notes.lab.test');
    await pages.signIn(safe, { email: person.email, password });
    expect([...safe.written]).toEqual([
      ['__Secure-authjs.session-token', expect.objectContaining({ secure: true, httpOnly: true, path: '/' })]
    ]);
    expect(await pages.whoAmI(safe)).toEqual(person);
  });
});
