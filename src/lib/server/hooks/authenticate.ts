import { error, type Cookies, type Handle } from '@sveltejs/kit';
import { bearerIn } from '../auth/access-key-text';
import { auth, authPath, isSessionCookie } from '../auth/authjs';
import { spendKeyRequest, spendWrongKey } from '../auth/key-limits';
import { ExpectedError, Unauthenticated } from '../errors';
import { noteActor } from '../request-context';
import { holderOfKey } from '../services/access-keys';
import { problemResponse } from './problem';

/** The session's cookie is written anew after this time, not with every answer. */
const renewAfterSeconds = 30 * 60;

type SetCookie = Cookies['set'];

/** Cookies travel over plain HTTP only where the whole site does. */
function secureByProtocol(cookies: Cookies, url: URL): void {
  const set: SetCookie = cookies.set.bind(cookies);
  cookies.set = (name, value, options) => set(name, value, { ...options, secure: url.protocol === 'https:' });
}

/** An access key counts at these routes alone: pages and their forms are for people who signed in. */
const takesKeys = (routeId: string | null): boolean => routeId?.startsWith('/api/v1/') ?? false;

/**
 * Finds out who asks, and puts the member on the locals. A request to the API that brings an access key is taken for that
 * key's person and nobody else: a session that comes with it does not count. Auth.js' own addresses are closed: signing
 * in and out go through our pages, and nothing else needs them.
 */
export const authenticate: Handle = ({ event, resolve }) => {
  const { pathname } = event.url;
  event.locals.actor = null;
  event.locals.keyScopes = null;
  const key = takesKeys(event.route.id) ? bearerIn(event.request.headers.get('authorization')) : null;
  if (key !== null) return answerByKey(key, event, resolve);
  if (pathname === authPath || pathname.startsWith(`${authPath}/`)) {
    error(404, 'There is nothing at this address that you can open.');
  }
  secureByProtocol(event.cookies, event.url);
  return auth.handle({
    event,
    resolve: async (known) => {
      known.locals.actor = await readActor(known);
      noteActor(known.locals.actor?.userId ?? null, known.locals.actor?.labId ?? null);
      return resolve(known);
    }
  });
};

type Visit = Parameters<Handle>[0];

/** Wrong, expired and revoked keys, and those of former members, are answered alike. */
async function answerByKey(key: string, event: Visit['event'], resolve: Visit['resolve']): Promise<Response> {
  try {
    const holder = await holderOfKey(key);
    if (holder === null) {
      await spendWrongKey(event.getClientAddress());
      throw new Unauthenticated(
        'This access key does not work. It may be mistyped, expired or revoked; the page "Access keys" of the lab tells.'
      );
    }
    await spendKeyRequest(holder.keyId);
    event.locals.actor = holder.actor;
    event.locals.keyScopes = holder.scopes;
    noteActor(holder.actor.userId, holder.actor.labId);
  } catch (refusal) {
    if (refusal instanceof ExpectedError) return problemResponse(refusal);
    throw refusal;
  }
  return resolve(event);
}

/**
 * The member of this request's session. Auth.js offers the cookie anew each time; it is passed on when the session
 * ended or the cookie grew old. Otherwise a slow answer could bring back the lab, or the password's session,
 * that a faster one has just replaced.
 */
async function readActor(event: Visit['event']): Promise<App.Locals['actor']> {
  const offered: Parameters<SetCookie>[] = [];
  const set = event.cookies.set;
  event.cookies.set = (...cookie) => {
    if (isSessionCookie(cookie[0])) offered.push(cookie);
  };
  const session = await event.locals.auth().finally(() => (event.cookies.set = set));
  const age = Date.now() / 1000 - (session?.writtenAt ?? 0);
  if (!session?.actor || age > renewAfterSeconds) for (const cookie of offered) event.cookies.set(...cookie);
  return session?.actor ?? null;
}
