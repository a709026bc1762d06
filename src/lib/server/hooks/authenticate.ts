import { error, type Cookies, type Handle } from '@sveltejs/kit';
import { auth, authPath, isSessionCookie } from '../auth/authjs';
import { noteActor } from '../request-context';

/** The session's cookie is written anew after this time, not with every answer. */
const renewAfterSeconds = 30 * 60;

type SetCookie = Cookies['set'];

/** Cookies travel over plain HTTP only where the whole site does. */
function secureByProtocol(cookies: Cookies, url: URL): void {
  const set: SetCookie = cookies.set.bind(cookies);
  cookies.set = (name, value, options) => set(name, value, { ...options, secure: url.protocol === 'https:' });
}

/**
 * Finds out who asks, and puts the member on the locals. Auth.js' own addresses are closed: signing in and out go
 * through our pages, and nothing else needs them.
 */
export const authenticate: Handle = ({ event, resolve }) => {
  const { pathname } = event.url;
  event.locals.actor = null;
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

/**
 * The member of this request's session. Auth.js offers the cookie anew each time; it is passed on when the session
 * ended or the cookie grew old. Otherwise a slow answer could bring back the lab, or the password's session,
 * that a faster one has just replaced.
 */
async function readActor(event: Parameters<Handle>[0]['event']): Promise<App.Locals['actor']> {
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
