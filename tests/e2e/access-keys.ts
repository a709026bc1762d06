import { expect, type APIRequestContext } from '@playwright/test';
import type { AccessScope } from '../../src/lib/domain/access-scopes';

let made = 0;

/** Makes an access key at the page, as a browser without JavaScript does; its name is made one of its own. */
export async function makeKey(
  request: APIRequestContext,
  origin: string,
  name: string,
  scopes: readonly AccessScope[]
): Promise<Readonly<{ id: string; key: string }>> {
  const answer = await request.post('/lab/access-keys?/make', {
    form: {
      name: `${name} ${Date.now().toString(36)}${made++}`,
      days: '30',
      ...Object.fromEntries(scopes.map((scope) => [scope, 'on']))
    },
    headers: { origin, accept: 'text/html' }
  });
  const page = await answer.text();
  const key = /hw_[a-z2-9]{8}_[A-Za-z0-9_-]{43}/.exec(page)?.[0] ?? '';
  expect(key, `the page answers ${answer.status()} and shows the key`).not.toBe('');
  // The newest of one's own keys is listed first.
  const id = /\?revoke=([0-9a-f-]{36})/.exec(page)?.[1] ?? '';
  return { id, key };
}

export async function revokeKey(request: APIRequestContext, origin: string, id: string): Promise<void> {
  const answer = await request.post('/lab/access-keys?/revoke', {
    form: { key: id },
    headers: { origin, accept: 'text/html' },
    maxRedirects: 0
  });
  expect(answer.status()).toBe(303);
}
