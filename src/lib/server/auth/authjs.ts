import { Auth, raw, skipCSRFCheck, type AuthConfig } from '@auth/core';
import { AuthError, CallbackRouteError, CredentialsSignin } from '@auth/core/errors';
import Credentials from '@auth/core/providers/credentials';
import { SvelteKitAuth } from '@auth/sveltekit';
import type { Cookies, RequestEvent } from '@sveltejs/kit';
import type { Actor } from '../../domain/actor';
import { config } from '../config';
import { logger } from '../logger';
import { checkSignIn, memberOf, type SessionClaims } from '../services/sessions';

declare module '@auth/core/types' {
  interface Session {
    /** Read anew for this request. */
    actor?: Actor;
    /** When the session's cookie was last written, in seconds since 1970. */
    writtenAt?: number;
  }
}

/** Auth.js answers its own addresses below this path; the request hook keeps all of them closed. */
export const authPath = '/auth';

/** A session ends after half a day without a request: benches share computers. */
const idleSeconds = 12 * 60 * 60;

/** True for the cookie of a session, or a piece of it. Auth.js has others, for ways of signing in that are not offered here. */
export function isSessionCookie(name: string): boolean {
  return name.includes('session-token');
}

type Claims = Readonly<Record<string, unknown>>;

function claimsIn(token: Claims): SessionClaims | null {
  const { sub, sessionVersion, labId } = token;
  if (typeof sub !== 'string' || typeof sessionVersion !== 'number' || typeof labId !== 'string') return null;
  return { userId: sub, sessionVersion, labId };
}

/** What the token keeps of the claims: nothing of the person, so that nothing in it can grow old. */
const tokenOf = ({ userId, sessionVersion, labId }: SessionClaims) => ({
  sub: userId,
  sessionVersion,
  labId
});

const text = (value: unknown): string => (typeof value === 'string' ? value : '');

/** A wrong password is ordinary; what went wrong besides is logged, without what was typed. */
const authLogger: NonNullable<AuthConfig['logger']> = {
  error(error) {
    if (error instanceof CredentialsSignin) return;
    const isStaleCookie =
      error.name === 'JWTSessionError' || Reflect.get(error, 'type') === 'JWTSessionError';
    if (isStaleCookie) logger.info('a session cookie could not be read and is dropped');
    else if (!(error instanceof CallbackRouteError)) logger.error({ err: error }, 'signing in failed');
  },
  warn(code) {
    logger.warn({ code }, 'warning of the sign-in library');
  },
  debug() {}
};

async function settings(event: Pick<RequestEvent, 'url' | 'getClientAddress'>): Promise<AuthConfig> {
  let member: Actor | null = null;
  return {
    providers: [
      Credentials({
        credentials: { email: {}, password: {}, labId: {} },
        async authorize(typed) {
          const claims = await checkSignIn({
            email: text(typed.email),
            password: text(typed.password),
            labId: text(typed.labId) || undefined,
            address: event.getClientAddress()
          });
          return claims && { id: claims.userId, claims };
        }
      })
    ],
    basePath: authPath,
    secret: config().authSecret,
    trustHost: true,
    useSecureCookies: event.url.protocol === 'https:',
    session: { strategy: 'jwt', maxAge: idleSeconds },
    pages: { signIn: '/sign-in', error: '/sign-in' },
    logger: authLogger,
    callbacks: {
      // Where to go is decided by the page that called, never by what the request names.
      redirect: ({ baseUrl }) => baseUrl,
      async jwt({ token, user, trigger, session }) {
        if (user) {
          const { claims } = user as { claims?: SessionClaims };
          return claims ? tokenOf(claims) : null;
        }
        const claims = claimsIn(token);
        if (claims === null) return null;
        const wanted = trigger === 'update' ? text((session as Claims | undefined)?.labId) : '';
        const asked = wanted === '' ? claims : { ...claims, labId: wanted };
        member = await memberOf(asked);
        // A lab one does not belong to leaves the session where it was.
        if (member === null && wanted !== '') member = await memberOf(claims);
        return member === null ? null : { ...token, ...tokenOf({ ...claims, labId: member.labId }) };
      },
      session: ({ session, token }) =>
        member === null
          ? session
          : { expires: session.expires, actor: member, writtenAt: Number(token.iat ?? 0) }
    }
  };
}

/** Auth.js in the framework: `handle` puts `auth()` on the locals. */
export const auth = SvelteKitAuth(settings);

type Caller = Pick<RequestEvent, 'url' | 'cookies' | 'getClientAddress'>;

/** Calls Auth.js with a request of our own making, and keeps the cookies it answers with. */
async function call(
  caller: Caller,
  action: string,
  body: Readonly<{ type: string; content: string }>
): Promise<void> {
  const request = new Request(`${caller.url.origin}${authPath}/${action}`, {
    method: 'POST',
    headers: { 'content-type': body.type, cookie: cookieHeader(caller.cookies) },
    body: body.content
  });
  const answer = await Auth(request, { ...(await settings(caller)), raw, skipCSRFCheck });
  for (const { name, value, options } of answer.cookies ?? []) {
    if (!isSessionCookie(name)) continue;
    caller.cookies.set(name, value, { path: '/', ...options } as Parameters<Cookies['set']>[2]);
  }
}

const cookieHeader = (cookies: Cookies): string =>
  cookies
    .getAll()
    .map(({ name, value }) => `${name}=${encodeURIComponent(value)}`)
    .join('; ');

/**
 * Begins a session. The page redirects afterwards.
 * @returns false when address and password do not belong together
 * @throws TooManyRequests, Forbidden for a person without a lab
 */
export async function startSession(
  caller: Caller,
  credentials: Readonly<{ email: string; password: string; labId?: string | undefined }>
): Promise<boolean> {
  const form = new URLSearchParams({ email: credentials.email, password: credentials.password });
  if (credentials.labId) form.set('labId', credentials.labId);
  try {
    await call(caller, 'callback/credentials', {
      type: 'application/x-www-form-urlencoded',
      content: form.toString()
    });
    return true;
  } catch (error) {
    if (error instanceof CredentialsSignin) return false;
    // What checkSignIn threw arrives wrapped.
    if (error instanceof AuthError && error.cause?.err instanceof Error) throw error.cause.err;
    throw error;
  }
}

/** Moves the running session to another lab of the same person. Does nothing for a lab they do not belong to. */
export async function useLab(caller: Caller, labId: string): Promise<void> {
  await call(caller, 'session', { type: 'application/json', content: JSON.stringify({ data: { labId } }) });
}

/** Ends the session in this browser. */
export async function endSession(caller: Caller): Promise<void> {
  await call(caller, 'signout', { type: 'application/x-www-form-urlencoded', content: '' });
}
