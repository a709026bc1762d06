import { describe, expect, it } from 'vitest';
import { nextPath, signInPath } from '../../../src/lib/server/auth/next-path';

describe('nextPath', () => {
  it.each(['/studies', '/studies/R-2026?view=table&q=a%20b', '/studies/X/history#event-4', '/'])(
    'keeps %s, a path of this site',
    (path) => {
      expect(nextPath(path)).toBe(path);
    }
  );

  it.each([
    ['another host', 'https://elsewhere.test/'],
    ['another host without a scheme', '//elsewhere.test'],
    ['a backslash that browsers read as a slash', '/\\elsewhere.test'],
    ['backslashes further on', '/a\\b'],
    ['a tab that browsers drop', '/\t/elsewhere.test'],
    ['a line end', '/a\r\nset-cookie: x'],
    ['dots that climb to two slashes', '/.//elsewhere.test'],
    ['dots in between', '/x/..//elsewhere.test'],
    ['a script', 'javascript:alert(1)'],
    ['a relative path', 'studies'],
    ['nothing', ''],
    ['null', null],
    ['a path without end', `/${'a'.repeat(3000)}`],
    ['the sign-in page itself', '/sign-in?next=/studies'],
    ['an endpoint', '/api/v1/studies'],
    ['the data of a page', '/studies/__data.json'],
    ['signing out', '/sign-out']
  ])('answers the start page for %s', (_what, path) => {
    expect(nextPath(path)).toBe('/');
  });

  it('takes what only begins like a page of signing in', () => {
    expect(nextPath('/sign-in-log')).toBe('/sign-in-log');
  });
});

describe('signInPath', () => {
  it('leads back to the page that was asked for, its filters included', () => {
    const path = signInPath('/lab/history', '?who=R%26D');
    expect(new URL(path, 'http://x.test').searchParams.get('next')).toBe('/lab/history?who=R%26D');
  });

  it('does not mention the start page', () => {
    expect(signInPath('/')).toBe('/sign-in');
  });
});
