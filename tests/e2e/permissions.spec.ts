import {
  expect,
  test,
  type APIRequestContext,
  type APIResponse,
  type PlaywrightWorkerArgs
} from '@playwright/test';
import type { AccessScope } from '../../src/lib/domain/access-scopes';
import { isAllowed } from '../../src/lib/domain/permissions';
import { roles, type Role } from '../../src/lib/domain/roles';
import {
  isPermission,
  isWriteByKey,
  routeAccess,
  scopeNeeded,
  type Access
} from '../../src/lib/server/auth/route-access';
import { findRoutes } from '../routes/route-files';
import { makeKey, revokeKey } from './access-keys';
import { signInByRequest } from './access-people';
import { nothing, queries, readExamples, type Examples } from './route-examples';

/*
 * Walks every route that the source has, by every way in (page, its data, each form action, each method), as each role,
 * as a member of another lab and as nobody. What must come back is worked out from the permission table; a route that
 * the route table does not list, or whose address cannot be made, fails here.
 */

/** One way in. */
interface Way {
  readonly title: string;
  readonly routeId: string;
  readonly kind: 'page' | 'data' | 'action' | 'endpoint';
  readonly method: string;
  readonly query: string;
}

const allWays: readonly Way[] = findRoutes().flatMap((route): readonly Way[] => {
  const way = (kind: Way['kind'], method: string, query = ''): Way => ({
    title: `${kind === 'data' ? 'data of ' : ''}${method} ${route.id}${query}`,
    routeId: route.id,
    kind,
    method,
    query
  });
  return [
    ...(route.isPage ? [way('page', 'GET'), way('data', 'GET')] : []),
    ...route.actions.map((name) => way('action', 'POST', name === 'default' ? '' : `?/${name}`)),
    ...route.methods.map((method) => way('endpoint', method))
  ];
});

const isApi = (way: Way): boolean => way.routeId.startsWith('/api/');

/** Ways for access keys alone: a session does not open them. */
const isForKeys = (way: Way): boolean => isWriteByKey(way.routeId, way.method);

function listedAccess(way: Way): Access | null {
  const rule = routeAccess[way.routeId];
  if (!rule) return null;
  if (way.method === 'GET' || way.method === 'HEAD') return rule.read;
  const { write } = rule;
  const action = way.query === '' ? 'default' : way.query.slice(2);
  return (typeof write === 'string' ? write : (write?.[way.method] ?? write?.[action])) ?? null;
}

/** The parameters of a route, each with the segment before it. */
const parametersOf = (routeId: string): readonly string[] =>
  [...routeId.matchAll(/([^/]+\/)\[+([a-z]+)(?:=[a-z]+)?\]+/gi)].map(
    ([, before, name]) => `${before}[${name}]`
  );

/** Ways that can be walked: the table says who may, and the address can be made. */
const ways = allWays.flatMap((way) => {
  const access = listedAccess(way);
  return access !== null && parametersOf(way.routeId).every((name) => name in nothing)
    ? [{ ...way, access }]
    : [];
});

const mayEnter = (access: Access, role: Role): boolean =>
  isPermission(access) ? isAllowed(role, access) : true;

/** The address of a route with its parameters filled in; "[token]" and the like of public pages get a made-up one. */
function addressOf(way: Way, examples: Examples): string {
  const path = way.routeId
    .replace(/([^/]+\/)\[+([a-z]+)(?:=[a-z]+)?\]+/gi, (_all, before: string, name: string) => {
      return before + encodeURIComponent(examples[`${before}[${name}]`] ?? '');
    })
    .replace(/\/\([^)]+\)/g, '');
  const suffix = way.kind === 'data' ? (path === '' ? '/__data.json' : `${path}/__data.json`) : path || '/';
  const needed = (way.method === 'GET' ? queries[way.routeId] : undefined) ?? '';
  return (
    suffix +
    way.query +
    needed.replace(/\{([^}]+)\}/g, (_all, name: string) => encodeURIComponent(examples[name] ?? ''))
  );
}

let origin = '';
test.beforeAll(({ baseURL }) => {
  origin = new URL(baseURL ?? '').origin;
});

/**
 * Asks without doing: a form action is sent plain text, which the framework turns down once the request has passed the
 * hooks. `asForm` sends an empty form instead, as endpoints get it always.
 */
async function ask(
  request: APIRequestContext,
  way: Way,
  examples: Examples,
  asForm = false
): Promise<APIResponse> {
  const address = addressOf(way, examples);
  const accept = way.kind === 'endpoint' || way.kind === 'data' ? 'application/json' : 'text/html';
  const sendsForm = asForm || way.kind === 'endpoint';
  if (way.method === 'GET') return request.get(address, { headers: { accept }, maxRedirects: 0 });
  return request.fetch(address, {
    method: way.method,
    headers: {
      accept: asForm ? 'application/json' : accept,
      origin,
      ...(sendsForm ? {} : { 'content-type': 'text/csv' })
    },
    ...(sendsForm ? { form: {} } : { data: 'x' }),
    maxRedirects: 0
  });
}

/** The examples as the chemist reads them: some links are shown to those alone who may change what they lead to. */
async function examplesOf(playwright: PlaywrightWorkerArgs['playwright']): Promise<Examples> {
  const chemist = await playwright.request.newContext({ baseURL: origin });
  await signInByRequest(chemist, 'chemist', origin);
  const examples = await readExamples(chemist);
  await chemist.dispose();
  return examples;
}

/** What refuses a stranger: the way to the sign-in page, or 401 for a program. */
async function isTurnedAway(way: Way, response: APIResponse): Promise<boolean> {
  if (isApi(way)) {
    return response.status() === 401 && response.headers()['content-type'] === 'application/problem+json';
  }
  if (way.kind === 'data') {
    const body = (await response.json()) as { type?: string; location?: string };
    return body.type === 'redirect' && (body.location ?? '').startsWith('/sign-in');
  }
  return response.status() === 303 && (response.headers().location ?? '').startsWith('/sign-in');
}

/** The status of an answer; the data of a page carry theirs inside. */
async function statusOf(way: Way, response: APIResponse): Promise<number> {
  if (way.kind !== 'data' || response.status() !== 200) return response.status();
  const { nodes = [] } = (await response.json()) as {
    nodes?: readonly ({ type: string; status?: number } | null)[];
  };
  return nodes.find((node) => node?.type === 'error')?.status ?? 200;
}

test('every way in can be walked', () => {
  expect(ways.length).toBeGreaterThan(50);
  expect(ways.filter(({ kind }) => kind === 'action').length).toBeGreaterThan(10);
  const unlisted = allWays.filter((way) => listedAccess(way) === null).map(({ title }) => title);
  expect(unlisted, 'src/lib/server/auth/route-access.ts says who may').toEqual([]);
  const withoutExample = allWays
    .flatMap(({ routeId }) => parametersOf(routeId))
    .filter((name) => !(name in nothing));
  expect(withoutExample, 'tests/e2e/route-examples.ts has a value for each parameter').toEqual([]);
});

for (const role of roles) {
  test(`every way in answers a ${role} as the permission table says`, async ({ request, playwright }) => {
    const examples = await examplesOf(playwright);
    await signInByRequest(request, role, origin);
    const wrong: string[] = [];
    for (const way of ways) {
      const { access } = way;
      // Signing out would end the walk; that it works is tested with the sign-in page.
      if (way.routeId === '/(app)/sign-out' && way.method === 'POST') continue;
      const response = await ask(request, way, examples);
      const status = await statusOf(way, response);
      if (isForKeys(way)) {
        if (!(await isTurnedAway(way, response))) wrong.push(`${way.title}: ${status} without a key`);
        continue;
      }
      const isRefused = status === 403;
      if (isRefused === mayEnter(access, role))
        wrong.push(`${way.title}: ${status}, which ${access} does not say`);
      else if (access !== 'public' && (await isTurnedAwayOf(way, response)))
        wrong.push(`${way.title}: turned away`);
      else if (status >= 500) wrong.push(`${way.title}: ${status}`);
      // Let in by the hooks, then turned down by the framework for its kind of content: the action itself was not run.
      else if (way.kind === 'action' && !isRefused && status !== 415) wrong.push(`${way.title}: ${status}`);
      else if (way.method === 'GET' && !isRefused && ![200, 303].includes(status) && access !== 'public') {
        wrong.push(`${way.title}: ${status} for something that is there`);
      }
    }
    expect(wrong).toEqual([]);
  });
}

/** A page may lead elsewhere by itself; only the sign-in page counts. */
async function isTurnedAwayOf(way: Way, response: APIResponse): Promise<boolean> {
  if (way.kind === 'data' && response.status() !== 200) return false;
  return isTurnedAway(way, response);
}

test('a stranger gets into the public pages and is turned away everywhere else', async ({
  request,
  playwright
}) => {
  const examples = await examplesOf(playwright);
  const wrong: string[] = [];
  for (const way of ways) {
    const response = await ask(request, way, examples);
    const isOut = await isTurnedAwayOf(way, response);
    if (isOut === (way.access === 'public')) wrong.push(`${way.title}: ${response.status()}`);
    if (response.status() >= 500) wrong.push(`${way.title}: ${response.status()}`);
  }
  expect(wrong).toEqual([]);
});

test('to another lab what is there and what is not answer alike, by every way in', async ({
  request,
  playwright
}) => {
  const chemist = await playwright.request.newContext({ baseURL: origin });
  await signInByRequest(chemist, 'chemist', origin);
  const examples = await readExamples(chemist);
  const title =
    /<title>([^<]*)<\/title>/.exec(
      await (await chemist.get(`/studies/${examples['studies/[study]']}`)).text()
    )?.[1] ?? '';
  await chemist.dispose();
  expect(title).not.toBe('');

  await signInByRequest(request, 'elsewhere', origin);
  const inLab = ways.filter((way) => /\[(?!token)/.test(way.routeId));
  expect(inLab.length).toBeGreaterThan(20);
  const wrong: string[] = [];
  for (const way of inLab) {
    const [there, absent] = [await ask(request, way, examples, true), await ask(request, way, nothing, true)];
    const [status, other] = [await statusOf(way, there), await statusOf(way, absent)];
    if (status !== other) {
      wrong.push(`${way.title}: ${status} for what another lab has, ${other} for what nobody has`);
    } else if (way.method === 'GET' && status !== 404) wrong.push(`${way.title}: ${status}`);
    else if (way.kind !== 'page') {
      // Programs read the body: it too must not tell one from the other.
      const [left, right] = [plain(await there.text(), examples), plain(await absent.text(), nothing)];
      if (left !== right) wrong.push(`${way.title}: "${left}" and "${right}"`);
    } else if ((await there.text()).includes(title)) wrong.push(`${way.title}: shows the title`);
  }
  expect(wrong).toEqual([]);
});

/** A body without what differs by right: the values that were asked for, and the id of the request. */
function plain(body: string, examples: Examples): string {
  let text = body.replace(/[0-9a-f]{8}-[0-9a-f-]{27}/g, 'ID');
  for (const value of Object.values(examples)) if (value.length > 2) text = text.replaceAll(value, 'VALUE');
  return text;
}

for (const role of roles) {
  test(`every way in answers the access key of a ${role} as the permission table says`, async ({
    request,
    playwright
  }) => {
    const examples = await examplesOf(playwright);
    await signInByRequest(request, role, origin);
    const scopes: AccessScope[] = isAllowed(role, 'data.enter') ? ['read', 'import'] : ['read'];
    const { key } = await makeKey(request, origin, `walk of a ${role}`, scopes);
    const program = await playwright.request.newContext({
      baseURL: origin,
      extraHTTPHeaders: { authorization: `Bearer ${key}` }
    });
    const wrong: string[] = [];
    for (const way of ways) {
      const response = await ask(program, way, examples);
      const status = await statusOf(way, response);
      if (way.access === 'public') continue;
      if (!isApi(way)) {
        if (!(await isTurnedAwayOf(way, response))) wrong.push(`${way.title}: ${status} with a key`);
        continue;
      }
      const scope = scopeNeeded(way.routeId, way.method);
      const may = mayEnter(way.access, role) && scope !== null && scopes.includes(scope);
      // What is sent is no file: turned down for that once the key was let in.
      const expected = !may ? 403 : way.method === 'GET' ? 200 : 415;
      if (status !== expected) wrong.push(`${way.title}: ${status}, not ${expected}`);
    }
    await program.dispose();
    expect(wrong).toEqual([]);
  });
}

test('a key that only brings data in reads nothing', async ({ request, playwright }) => {
  await signInByRequest(request, 'chemist', origin);
  const examples = await readExamples(request);
  const { key } = await makeKey(request, origin, 'bringer', ['import']);
  const program = await playwright.request.newContext({
    baseURL: origin,
    extraHTTPHeaders: { authorization: `Bearer ${key}` }
  });
  const readings = ways.filter((way) => isApi(way) && way.method === 'GET' && way.access !== 'public');
  expect(readings.length).toBeGreaterThan(10);
  const wrong: string[] = [];
  for (const way of readings) {
    const response = await ask(program, way, examples);
    if (response.status() !== 403) wrong.push(`${way.title}: ${response.status()}`);
  }
  await program.dispose();
  expect(wrong).toEqual([]);
});

test('to another lab’s key what is there and what is not answer alike', async ({ request, playwright }) => {
  await signInByRequest(request, 'chemist', origin);
  const examples = await readExamples(request);
  const elsewhere = await playwright.request.newContext({ baseURL: origin });
  await signInByRequest(elsewhere, 'elsewhere', origin);
  const { key, id } = await makeKey(elsewhere, origin, 'from elsewhere', ['read', 'import']);
  const program = await playwright.request.newContext({
    baseURL: origin,
    extraHTTPHeaders: { authorization: `Bearer ${key}` }
  });
  const wrong: string[] = [];
  for (const way of ways.filter((each) => isApi(each) && /\[/.test(each.routeId))) {
    const there = await ask(program, way, examples);
    const absent = await ask(program, way, nothing);
    const [left, right] = [plain(await there.text(), examples), plain(await absent.text(), nothing)];
    if (there.status() !== absent.status() || left !== right)
      wrong.push(`${way.title}: ${there.status()} and ${absent.status()}`);
    else if (way.method === 'GET' && there.status() !== 404) wrong.push(`${way.title}: ${there.status()}`);
  }
  expect(wrong).toEqual([]);
  // Revoked in the middle: the next request is turned away.
  expect((await program.get('/api/v1/studies')).status()).toBe(200);
  await revokeKey(elsewhere, origin, id);
  expect((await program.get('/api/v1/studies')).status()).toBe(401);
  await Promise.all([program.dispose(), elsewhere.dispose()]);
});

test('addresses of the sign-in library are closed', async ({ request }) => {
  for (const action of ['session', 'signin', 'signin/credentials', 'signout', 'csrf', 'providers', 'error']) {
    expect((await request.get(`/auth/${action}`, { maxRedirects: 0 })).status(), action).toBe(404);
  }
  const form = { email: 'ines.marlow@fennick-weir.example', password: 'x' };
  const posted = await request.post('/auth/callback/credentials', {
    form,
    headers: { origin },
    maxRedirects: 0
  });
  expect(posted.status()).toBe(404);
});
