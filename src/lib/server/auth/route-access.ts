import type { AccessScope } from '../../domain/access-scopes';
import { permissions, type Permission } from '../../domain/permissions';

/** Who gets in: anybody, any member of the lab, or the roles that hold a permission. */
export type Access = 'public' | 'member' | Permission;

export interface RouteRule {
  /** For GET and HEAD, and for the data of a page. */
  readonly read: Access;
  /**
   * For everything else: one access for all, or one for each form action (`default` where it has no name) or,
   * at an endpoint, for each method. What is not listed is refused.
   */
  readonly write?: Access | Readonly<Record<string, Access>>;
  /**
   * Methods of an endpoint that are for programs alone: what the access key must be for. A session does not do, so that
   * no page of another site can have a browser send them. Other writes are closed to keys; reading takes the scope `read`.
   */
  readonly byKey?: Readonly<Record<string, AccessScope>>;
}

/**
 * Every route of the application by its id. A route that is not here answers nobody: the table is the one place
 * where the way in is opened. Services check once more, with the lab and the study at hand.
 */
export const routeAccess: Readonly<Record<string, RouteRule>> = {
  '/healthz': { read: 'public' },
  '/readyz': { read: 'public' },

  '/(public)/sign-in': { read: 'public', write: { default: 'public' } },
  '/(public)/forgot-password': { read: 'public', write: { default: 'public' } },
  '/(public)/reset-password/[token]': { read: 'public', write: { default: 'public' } },
  '/(public)/invitations/[token]': { read: 'public', write: { create: 'public', join: 'public' } },
  '/(public)/mailbox': { read: 'public' },
  '/(public)/theme': { read: 'public', write: 'public' },

  '/(app)': { read: 'member' },
  '/(app)/account': { read: 'member', write: { name: 'member', password: 'member' } },
  '/(app)/sign-out': { read: 'member', write: { default: 'member' } },
  '/(app)/switch-lab': { read: 'member', write: { default: 'member' } },
  '/(app)/lab': { read: 'member' },
  '/(app)/lab/members': {
    read: 'member',
    write: {
      invite: 'members.manage',
      revoke: 'members.manage',
      role: 'members.manage',
      remove: 'members.manage'
    }
  },
  '/(app)/lab/access-keys': {
    read: 'access-keys.own',
    write: { make: 'access-keys.own', revoke: 'access-keys.own' }
  },
  '/(app)/lab/settings': { read: 'lab.settings', write: { default: 'lab.settings' } },
  '/(app)/lab/history': { read: 'lab.settings' },
  '/(app)/studies/[study]/history': { read: 'studies.see' },
  '/(app)/library': { read: 'studies.see' },
  '/(app)/library/analytes': { read: 'studies.see' },
  '/(app)/library/analytes/new': {
    read: 'library.edit',
    write: { look: 'library.edit', store: 'library.edit' }
  },
  '/(app)/library/analytes/[analyte]': { read: 'studies.see' },
  '/(app)/library/analytes/[analyte]/edit': {
    read: 'library.edit',
    write: { look: 'library.edit', store: 'library.edit' }
  },
  '/(app)/library/criteria': { read: 'studies.see' },
  '/(app)/library/criteria/new': { read: 'library.edit', write: { default: 'library.edit' } },
  '/(app)/library/criteria/[set]': { read: 'studies.see' },
  '/(app)/library/criteria/[set]/edit': { read: 'library.edit', write: { default: 'library.edit' } },

  '/(app)/studies': { read: 'studies.see' },
  '/(app)/studies/new': {
    read: 'studies.edit',
    write: { look: 'studies.edit', create: 'studies.edit' }
  },
  '/(app)/studies/[study]/aim': { read: 'studies.see', write: { default: 'studies.edit' } },
  '/(app)/studies/[study]/panel': {
    read: 'studies.see',
    write: { paste: 'studies.edit', set: 'studies.edit', renew: 'studies.edit', remove: 'studies.edit' }
  },
  '/(app)/studies/[study]/panel/chemistry': { read: 'studies.see' },
  '/(app)/studies/[study]/panel/chemistry.csv': { read: 'export.any' },
  '/(app)/studies/[study]/panel/chemistry.svg': { read: 'export.any' },
  '/(app)/studies/[study]/variants': { read: 'studies.see' },
  '/(app)/studies/[study]/variants/new': { read: 'studies.edit', write: { default: 'studies.edit' } },
  '/(app)/studies/[study]/variants/[variant]': {
    read: 'studies.see',
    write: { name: 'studies.edit', steps: 'studies.edit', evidence: 'studies.edit', remove: 'studies.edit' }
  },
  '/(app)/studies/[study]/experiments': { read: 'studies.see' },
  '/(app)/studies/[study]/experiments/new': { read: 'studies.edit', write: { default: 'studies.edit' } },
  '/(app)/studies/[study]/experiments/[experiment]': {
    read: 'studies.see',
    write: {
      exclude: 'data.exclude',
      lift: 'data.exclude',
      add: 'studies.edit',
      preparation: 'data.enter',
      observe: 'data.enter',
      spike: 'data.enter',
      remove: 'studies.edit'
    }
  },
  '/(app)/studies/[study]/experiments/[experiment]/edit': {
    read: 'studies.edit',
    write: { default: 'studies.edit' }
  },
  '/(app)/studies/[study]/calibration': { read: 'studies.see' },
  '/(app)/studies/[study]/calibration/new': {
    read: 'calibrations.choose',
    write: { default: 'calibrations.choose' }
  },
  '/(app)/studies/[study]/calibration/[set]': {
    read: 'studies.see',
    write: { choose: 'calibrations.choose' }
  },
  '/(app)/studies/[study]/calibration/[set]/levels': {
    read: 'calibrations.choose',
    write: { preview: 'calibrations.choose', store: 'calibrations.choose' }
  },
  '/(app)/studies/[study]/calibration/[set]/checks': {
    read: 'studies.see',
    write: { add: 'calibrations.choose' }
  },
  '/(app)/studies/[study]/calibration/[set]/checks/[check]': {
    read: 'calibrations.choose',
    write: { change: 'calibrations.choose', remove: 'calibrations.choose' }
  },
  '/(app)/studies/[study]/calibration/sequences/[sequence]': { read: 'studies.see' },
  '/(public)/help': { read: 'public' },
  '/(public)/help/figures': { read: 'public' },
  '/(public)/help/chemistry': { read: 'public' },
  '/(public)/help/data-files': { read: 'public' },
  '/(public)/help/api': { read: 'public' },

  '/(app)/studies/[study]/data': {
    read: 'studies.see',
    write: { upload: 'data.enter', withdraw: 'imports.withdraw-own' }
  },
  '/(app)/studies/[study]/data/[import]': {
    read: 'studies.see',
    write: {
      declare: 'data.enter',
      column: 'data.enter',
      table: 'data.enter',
      sheet: 'data.enter',
      labels: 'data.enter',
      assign: 'data.enter',
      mend: 'data.enter',
      unmend: 'data.enter',
      reset: 'data.enter',
      keep: 'data.enter',
      store: 'data.enter',
      drop: 'data.enter',
      withdraw: 'imports.withdraw-own'
    }
  },
  '/(app)/studies/[study]/data/[import]/file': { read: 'studies.see' },
  '/(app)/studies/[study]/data/[import]/annotated.xlsx': { read: 'studies.see' },
  '/(app)/lab/layouts': { read: 'studies.see', write: { retire: 'data.enter', revive: 'data.enter' } },
  '/(app)/studies/[study]/experiments/[experiment]/template.xlsx': { read: 'studies.see' },
  '/(app)/studies/[study]/experiments/[experiment]/type': {
    read: 'data.enter',
    write: { keep: 'data.enter', plan: 'data.enter', discard: 'data.enter', check: 'data.enter' }
  },

  '/(app)/studies/[study]': { read: 'studies.see' },
  '/(app)/studies/[study]/balance': { read: 'studies.see' },
  '/(app)/studies/[study]/walk-back': { read: 'studies.see' },
  '/(app)/studies/[study]/compare': { read: 'studies.see' },
  '/(app)/studies/[study]/validation': {
    read: 'studies.see',
    write: { choose: 'studies.edit', pair: 'studies.edit', unpair: 'studies.edit' }
  },
  '/(app)/studies/[study]/validation/experiment': { read: 'studies.see' },
  '/(app)/studies/[study]/validation.csv': { read: 'export.any' },
  '/(app)/studies/[study]/results.csv': { read: 'export.any' },
  '/(app)/studies/[study]/balance.csv': { read: 'export.any' },
  '/(app)/studies/[study]/balance.svg': { read: 'export.any' },
  '/(app)/studies/[study]/walk-back.csv': { read: 'export.any' },
  '/(app)/studies/[study]/compare.csv': { read: 'export.any' },
  '/(app)/studies/[study]/summary': { read: 'studies.see' },
  '/(app)/studies/[study]/summary.xlsx': { read: 'export.any' },
  '/api/v1/openapi.json': { read: 'public' },
  '/api/v1/studies': { read: 'studies.see' },
  '/api/v1/studies/[study]': { read: 'studies.see' },
  '/api/v1/studies/[study]/experiments': { read: 'studies.see' },
  '/api/v1/studies/[study]/experiments/[experiment]/template.xlsx': { read: 'studies.see' },
  '/api/v1/studies/[study]/imports': {
    read: 'studies.see',
    write: { POST: 'data.enter' },
    byKey: { POST: 'import' }
  },
  '/api/v1/studies/[study]/imports/[import]': { read: 'studies.see' },
  '/api/v1/studies/[study]/imports/[import]/file': { read: 'studies.see' },
  '/api/v1/studies/[study]/results': { read: 'studies.see' },
  '/api/v1/studies/[study]/balance': { read: 'studies.see' },
  '/api/v1/studies/[study]/stages': { read: 'studies.see' },
  '/api/v1/studies/[study]/chemistry': { read: 'studies.see' },
  '/api/v1/studies/[study]/walk-back': { read: 'studies.see' },
  '/api/v1/studies/[study]/compare': { read: 'studies.see' },
  '/api/v1/studies/[study]/validation': { read: 'studies.see' },
  '/api/v1/studies/[study]/portions': { read: 'studies.see' },
  '/api/v1/studies/[study]/provenance': { read: 'studies.see' }
};

/** The name of the form action that an address means, as the framework reads it: the first parameter that begins with a slash. */
export function actionName(parameters: URLSearchParams): string {
  const named = [...parameters.keys()].find((key) => key.startsWith('/'));
  return named ? named.slice(1) : 'default';
}

/**
 * What a request needs, or null when the route, the method or the action is not listed.
 * @param rules the table; another one in tests
 */
export function requiredAccess(
  request: Readonly<{ routeId: string; method: string; parameters: URLSearchParams }>,
  rules: Readonly<Record<string, RouteRule>> = routeAccess
): Access | null {
  if (!Object.hasOwn(rules, request.routeId)) return null;
  const { read, write } = rules[request.routeId] as RouteRule;
  if (reads(request.method)) return read;
  if (write === undefined) return null;
  if (typeof write === 'string') return write;
  const names = [request.method, ...(request.method === 'POST' ? [actionName(request.parameters)] : [])];
  const listed = names.find((name) => Object.hasOwn(write, name));
  return listed === undefined ? null : (write[listed] ?? null);
}

const reads = (method: string): boolean => method === 'GET' || method === 'HEAD';

/** What an access key must be for; null: no key does it. */
export function scopeNeeded(routeId: string, method: string): AccessScope | null {
  if (reads(method)) return 'read';
  return routeAccess[routeId]?.byKey?.[method] ?? null;
}

/** True for a write that is for access keys alone. */
export function isWriteByKey(routeId: string, method: string): boolean {
  return !reads(method) && scopeNeeded(routeId, method) !== null;
}

/** True for an access that only some roles have. */
export function isPermission(access: Access): access is Permission {
  return Object.hasOwn(permissions, access);
}
