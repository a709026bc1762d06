import { describe, expect, it } from 'vitest';
import { actionName, requiredAccess, type RouteRule } from '../../../src/lib/server/auth/route-access';

const rules: Readonly<Record<string, RouteRule>> = {
  '/open': { read: 'public' },
  '/(app)/page': { read: 'member', write: { default: 'studies.edit', exclude: 'data.exclude' } },
  '/api/thing': { read: 'studies.see', write: { PUT: 'library.edit' } },
  '/all': { read: 'public', write: 'member' }
};
const ask = (routeId: string, method = 'GET', query = '') =>
  requiredAccess({ routeId, method, parameters: new URLSearchParams(query) }, rules);

describe('requiredAccess', () => {
  it('refuses a route that is not listed', () => {
    expect(ask('/new')).toBeNull();
    expect(ask('/new', 'POST')).toBeNull();
    expect(ask('constructor')).toBeNull();
    expect(ask('__proto__')).toBeNull();
  });

  it('reads for GET and HEAD', () => {
    expect(ask('/open')).toBe('public');
    expect(ask('/(app)/page', 'HEAD')).toBe('member');
  });

  it('refuses to write where nothing is listed', () => {
    expect(ask('/open', 'POST')).toBeNull();
    expect(ask('/open', 'OPTIONS')).toBeNull();
  });

  it('asks for what the form action asks for', () => {
    expect(ask('/(app)/page', 'POST')).toBe('studies.edit');
    expect(ask('/(app)/page', 'POST', '/exclude')).toBe('data.exclude');
    expect(ask('/(app)/page', 'POST', 'view=a&/exclude')).toBe('data.exclude');
    expect(ask('/(app)/page', 'POST', '/erase')).toBeNull();
    expect(ask('/(app)/page', 'POST', '/toString')).toBeNull();
    expect(ask('/(app)/page', 'DELETE', '/exclude')).toBeNull();
  });

  it('takes the first action that an address names, as the framework does', () => {
    expect(ask('/(app)/page', 'POST', '/exclude&/default')).toBe('data.exclude');
    expect(actionName(new URLSearchParams('a=/b&/c&/d'))).toBe('c');
  });

  it('asks for what the method of an endpoint asks for', () => {
    expect(ask('/api/thing', 'PUT')).toBe('library.edit');
    expect(ask('/api/thing', 'POST')).toBeNull();
    expect(ask('/api/thing', 'PATCH')).toBeNull();
    expect(ask('/all', 'DELETE')).toBe('member');
  });
});
