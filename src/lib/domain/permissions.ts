import type { Role } from './roles';

/**
 * Who may do what. The one table that services, the request hook and the screens ask;
 * anything not listed is refused.
 */
export const permissions = {
  'studies.see': ['chemist', 'analyst', 'manager', 'reviewer'],
  'studies.edit': ['chemist', 'manager'],
  'data.enter': ['chemist', 'analyst', 'manager'],
  'data.exclude': ['chemist', 'analyst', 'manager'],
  'imports.withdraw-any': ['chemist', 'manager'],
  'imports.withdraw-own': ['chemist', 'analyst', 'manager'],
  'calibrations.choose': ['chemist', 'manager'],
  'review.submit': ['chemist', 'manager'],
  'review.sign': ['reviewer'],
  'review.approve': ['manager'],
  'variants.choose': ['manager'],
  'library.edit': ['chemist', 'manager'],
  'members.manage': ['manager'],
  'lab.settings': ['manager'],
  'export.any': ['chemist', 'analyst', 'manager', 'reviewer'],
  'access-keys.own': ['chemist', 'analyst', 'manager', 'reviewer'],
  'access-keys.revoke-any': ['manager']
} as const satisfies Record<string, readonly Role[]>;

export type Permission = keyof typeof permissions;

/** True when the role holds the permission. */
export function isAllowed(role: Role, permission: Permission): boolean {
  return (permissions[permission] as readonly Role[]).includes(role);
}

/** The roles that hold a permission, worded for a refusal: "a chemist or a lab manager". */
export function rolesAllowed(permission: Permission): readonly Role[] {
  return permissions[permission];
}
