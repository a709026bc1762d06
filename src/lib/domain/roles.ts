/** The four roles a member of a lab can hold; one each. */
export const roles = ['chemist', 'analyst', 'manager', 'reviewer'] as const;
export type Role = (typeof roles)[number];

export const roleLabels: Readonly<Record<Role, string>> = {
  chemist: 'Chemist',
  analyst: 'Analyst',
  manager: 'Lab manager',
  reviewer: 'Reviewer'
};

export function isRole(value: unknown): value is Role {
  return typeof value === 'string' && (roles as readonly string[]).includes(value);
}
