/** The four roles a member of a lab can hold; one each. */
export const roles = ['chemist', 'analyst', 'manager', 'reviewer'] as const;
export type Role = (typeof roles)[number];

export const roleLabels: Readonly<Record<Role, string>> = {
  chemist: 'Chemist',
  analyst: 'Analyst',
  manager: 'Lab manager',
  reviewer: 'Reviewer'
};

/** What each role is for, in one sentence to the person who holds it. */
export const roleTasks: Readonly<Record<Role, string>> = {
  chemist: 'You plan studies, panels, variants and experiments, and read where the loss is.',
  analyst: 'You bring the data in, and set aside with its cause what went wrong at the bench.',
  manager: 'You look after the people and the settings of the lab, and decide which variant is chosen.',
  reviewer: 'You read validation summaries down to the cells they rest on, and sign them or send them back.'
};

export function isRole(value: unknown): value is Role {
  return typeof value === 'string' && (roles as readonly string[]).includes(value);
}
