/** Any base serves: it only shows whether an address stays on its host. */
const base = 'http://headwater.invalid';

/** Pages that make no sense as a destination after signing in. */
const neverNext = /^\/(sign-in|sign-out|auth|api|forgot-password|reset-password)(\/|$)|\/__data\.json$/;

/**
 * Where to go after signing in: the address asked for when it is a path of this application, else the start page.
 * Other hosts are refused in all their spellings (`//host`, `/\host`, control characters that browsers drop).
 */
export function nextPath(asked: string | null | undefined): string {
  if (!asked || !asked.startsWith('/') || /^\/[/\\]/.test(asked) || asked.length > 2000) return '/';
  // eslint-disable-next-line no-control-regex -- browsers drop tabs and line ends inside an address
  if (/[\u0000-\u001f\u007f\\]/.test(asked)) return '/';
  const url = URL.canParse(asked, base) ? new URL(asked, base) : null;
  if (url === null || url.origin !== base || url.pathname.startsWith('//') || neverNext.test(url.pathname)) {
    return '/';
  }
  return url.pathname + url.search + url.hash;
}

/** The sign-in page that leads back to an address; the start page needs no mention. */
export function signInPath(pathname: string, search = ''): string {
  const next = nextPath(pathname + search);
  return next === '/' ? '/sign-in' : `/sign-in?next=${encodeURIComponent(next)}`;
}
