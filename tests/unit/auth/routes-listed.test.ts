import { describe, expect, it } from 'vitest';
import { isAllowed } from '../../../src/lib/domain/permissions';
import { isPermission, routeAccess, type Access } from '../../../src/lib/server/auth/route-access';
import { findRoutes } from '../../routes/route-files';

const routes = findRoutes();
const listed = Object.entries(routeAccess);

/** Every way to write that the table opens: its route, the action or method, and what it asks for. */
const writes = listed.flatMap(([id, { write }]) =>
  write === undefined
    ? []
    : typeof write === 'string'
      ? [{ id, name: '*', access: write }]
      : Object.entries(write).map(([name, access]) => ({ id, name, access }))
);

describe('the route table', () => {
  it('finds the routes it is held against', () => {
    expect(routes.length).toBeGreaterThan(20);
    expect(routes.find(({ id }) => id === '/(app)/lab/members')).toEqual({
      id: '/(app)/lab/members',
      isPage: true,
      actions: ['invite', 'revoke', 'role', 'remove'],
      methods: []
    });
    expect(routes.find(({ id }) => id === '/healthz')?.methods).toEqual(['GET']);
  });

  it.each(routes.map((route) => [route.id, route] as const))(
    'lists %s with its actions and methods',
    (id, route) => {
      const rule = routeAccess[id];
      expect(rule, `${id} has no entry in src/lib/server/auth/route-access.ts`).toBeDefined();
      const write = rule?.write;
      const names = [
        ...route.actions,
        ...route.methods.filter((method) => method !== 'GET' && method !== 'HEAD')
      ];
      if (typeof write === 'string') expect(names.length).toBeGreaterThan(0);
      // A POST endpoint may be listed by its method or, like an action, as the default.
      else {
        const open = Object.keys(write ?? {}).map((name) =>
          name === 'default' && route.methods.includes('POST') ? 'POST' : name
        );
        expect(open.sort()).toEqual([...names].sort());
      }
    }
  );

  it('lists nothing that is not there', () => {
    const ids = new Set(routes.map(({ id }) => id));
    expect(listed.map(([id]) => id).filter((id) => !ids.has(id))).toEqual([]);
  });

  it('opens nothing outside of the public pages to strangers', () => {
    const open = listed
      .filter(([, rule]) => rule.read === 'public' || allows(rule.write, 'public'))
      .map(([id]) => id);
    const expected = /^\/(healthz|readyz|\(public\)\/.*|api\/v1\/openapi\.json)$/;
    expect(open.filter((id) => !expected.test(id))).toEqual([]);
  });

  it('keeps every page and endpoint of a lab to its members', () => {
    const inside = listed.filter(
      ([id]) => (id.startsWith('/(app)') || id.startsWith('/api/')) && id !== '/api/v1/openapi.json'
    );
    expect(inside.length).toBeGreaterThan(15);
    expect(inside.filter(([, rule]) => rule.read === 'public' || allows(rule.write, 'public'))).toEqual([]);
  });

  it('lets every member change only what is their own', () => {
    const own = writes.filter(({ access }) => !isPermission(access) && access !== 'public');
    expect(own.map(({ id, name }) => `${id} ${name}`).sort()).toEqual([
      '/(app)/account name',
      '/(app)/account password',
      '/(app)/sign-out default',
      '/(app)/switch-lab default'
    ]);
  });

  it('asks for more than seeing before anything in a study or the library changes', () => {
    const content = writes.filter(({ id }) => id.includes('/studies') || id.includes('/library'));
    expect(content.length).toBeGreaterThan(0);
    for (const { id, name, access } of content) {
      expect(isPermission(access), `${id} ${name}`).toBe(true);
      if (!isPermission(access) || access.startsWith('review.')) continue;
      // Reviewers look and sign; they change nothing that they will sign.
      expect(isAllowed('reviewer', access), `${id} ${name} is open to a reviewer by ${access}`).toBe(false);
    }
  });
});

function allows(write: (typeof routeAccess)[string]['write'], access: Access): boolean {
  return typeof write === 'string' ? write === access : Object.values(write ?? {}).includes(access);
}
