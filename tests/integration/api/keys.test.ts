import { beforeAll, describe, expect, it } from 'vitest';
import type { AccessScope } from '../../../src/lib/domain/access-scopes';
import type { Actor } from '../../../src/lib/domain/actor';
import type { Lab } from '../../../src/lib/server/db/models/lab';
import { AttemptLimit } from '../../../src/lib/server/db/models/attempt-limit';
import { createLogger } from '../../../src/lib/server/logger';
import { makeAccessKey, revokeAccessKey } from '../../../src/lib/server/services/access-keys';
import { changeRole, removeMember } from '../../../src/lib/server/services/members';
import { makeLab } from '../../factories/lab';
import { makeMember } from '../../factories/member';
import { makeStudy } from '../../factories/study';
import { signedIn, makePerson } from '../access/people';
import { call, read } from './program';

let lab: Lab;
let manager: Actor;
let chemist: Actor;
let code: string;
let count = 0;

const keyFor = (actor: Actor, ...scopes: AccessScope[]) =>
  makeAccessKey(actor, { name: `key ${(count += 1)}`, scopes, days: 30 });
const study = (key: string | null, address?: string) =>
  call({ route: '/studies/[study]', params: { study: code }, key, ...(address ? { address } : {}) });
const bring = (key: string | null) =>
  call({
    route: '/studies/[study]/imports',
    params: { study: code },
    query: { file: 'a.csv' },
    key,
    headers: { 'content-type': 'application/octet-stream' },
    body: 'Sample,Amount (ng)\n'
  });

beforeAll(async () => {
  lab = await makeLab();
  manager = await makeMember({ lab, role: 'manager' });
  chemist = await makeMember({ lab, role: 'chemist' });
  ({
    study: { code }
  } = await makeStudy(chemist));
});

describe('a request with an access key', () => {
  it('is answered as its person', async () => {
    const { key } = await keyFor(chemist, 'read');
    const { status, body } = await read(await study(key));
    expect(status).toBe(200);
    expect(body).toMatchObject({ study: { code } });
  });

  it('is turned away alike with a wrong, a revoked and a former member’s key', async () => {
    const revoked = await keyFor(chemist, 'read');
    await revokeAccessKey(chemist, revoked.id);
    const leaver = await makeMember({ lab, role: 'chemist' });
    const left = await keyFor(leaver, 'read');
    await removeMember(manager, { userId: leaver.userId });
    const answers = [];
    for (const key of [revoked.key, left.key, `hw_abcdefgh_${'a'.repeat(43)}`, 'x', '']) {
      const response = await study(key);
      expect(response.headers.get('content-type')).toBe('application/problem+json');
      expect(response.headers.get('www-authenticate')).toMatch(/^Bearer/);
      answers.push(await read(response));
    }
    expect(answers[0]).toMatchObject({ status: 401, body: { code: 'unauthenticated', status: 401 } });
    for (const answer of answers) expect(answer).toEqual(answers[0]);
  });

  it('is turned away from the moment the key is revoked or the person removed, and takes a new role at once', async () => {
    const person = await makeMember({ lab, role: 'chemist' });
    const first = await keyFor(person, 'read', 'import');
    expect((await study(first.key)).status).toBe(200);
    await changeRole(manager, { userId: person.userId, role: 'reviewer' });
    expect(await read(await bring(first.key))).toMatchObject({ status: 403, body: { code: 'forbidden' } });
    expect((await study(first.key)).status).toBe(200);
    await revokeAccessKey(manager, first.id);
    expect((await study(first.key)).status).toBe(401);
    const second = await keyFor({ ...person, role: 'reviewer' }, 'read');
    expect((await study(second.key)).status).toBe(200);
    await removeMember(manager, { userId: person.userId });
    expect((await study(second.key)).status).toBe(401);
  });

  it('does what the key is for and nothing else', async () => {
    const reading = await keyFor(chemist, 'read');
    expect(await read(await bring(reading.key))).toMatchObject({
      status: 403,
      body: { detail: expect.stringContaining('"import"') }
    });
    const importing = await keyFor(chemist, 'import');
    expect(await read(await study(importing.key))).toMatchObject({
      status: 403,
      body: { detail: expect.stringContaining('"read"') }
    });
  });

  it('finds another lab’s study no more than one that nobody has', async () => {
    const { key } = await keyFor(await makeMember({ role: 'chemist' }), 'read', 'import');
    const there = await read(await study(key));
    const nowhere = await read(await call({ route: '/studies/[study]', params: { study: 'NONE-1' }, key }));
    expect(there).toEqual(nowhere);
    expect(there.status).toBe(404);
    expect((await bring(key)).status).toBe(404);
  });

  it('is refused when it asks too often, and goes on later', async () => {
    const { id, key } = await keyFor(chemist, 'read');
    expect((await study(key)).status).toBe(200);
    await AttemptLimit.update({ points: 600 }, { where: { key: `access-key:${id}` } });
    const refused = await study(key);
    expect(refused.status).toBe(429);
    expect(Number(refused.headers.get('retry-after'))).toBeGreaterThan(0);
    await AttemptLimit.update({ expire: String(Date.now() - 1) }, { where: { key: `access-key:${id}` } });
    expect((await study(key)).status).toBe(200);
  });

  it('works while wrong keys from the same address are held back', async () => {
    const { key } = await keyFor(chemist, 'read');
    const address = '198.51.100.7';
    const statuses = [];
    for (let tries = 0; tries < 61; tries += 1) statuses.push((await study('wrong', address)).status);
    expect(statuses.filter((status) => status === 401)).toHaveLength(60);
    expect(statuses.at(-1)).toBe(429);
    expect((await study(key, address)).status).toBe(200);
  });
});

describe('a session', () => {
  it('does not open what is for keys, and a wrong key beside it is not made good by it', async () => {
    const person = await makePerson({ lab, role: 'chemist' });
    const browser = await signedIn(person);
    const cookie = [...browser.cookies].map(([name, value]) => `${name}=${value}`).join('; ');
    const sent = {
      route: '/studies/[study]/imports',
      params: { study: code },
      headers: { cookie, 'content-type': 'application/octet-stream' },
      body: 'x'
    };
    expect((await call({ ...sent, key: null })).status).toBe(401);
    expect((await call({ ...sent, key: 'wrong' })).status).toBe(401);
  });

  it('is not begun by a key: pages take it for nobody', async () => {
    const { key } = await keyFor(chemist, 'read', 'import');
    const browser = await signedIn(await makePerson({ lab, role: 'reviewer' }));
    const visit = {
      routeId: '/(app)/account',
      path: '/account',
      headers: { authorization: `Bearer ${key}` }
    };
    const asReviewer = await browser.visit(visit, ({ locals }) => locals.actor?.role);
    expect(asReviewer.data).toBe('reviewer');
    browser.cookies.clear();
    const asNobody = await browser.visit(visit, ({ locals }) => locals.actor?.role);
    expect(asNobody).toMatchObject({ status: 303 });
    expect(browser.cookies.size).toBe(0);
  });
});

describe('the log', () => {
  it('never holds a key', () => {
    const lines: string[] = [];
    const log = createLogger({ write: (line) => void lines.push(line) });
    log.level = 'info';
    const secret = `hw_abcdefgh_${'s'.repeat(43)}`;
    log.info(
      { authorization: `Bearer ${secret}`, headers: { authorization: `Bearer ${secret}` } },
      'request'
    );
    log.info({ accessKey: secret, body: { accessKey: secret } }, 'made');
    expect(lines).toHaveLength(2);
    expect(lines.join('')).not.toContain(secret);
  });
});
