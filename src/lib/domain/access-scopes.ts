/** What an access key may do at most; the role of its person may allow less. */
export const accessScopes = ['read', 'import'] as const;
export type AccessScope = (typeof accessScopes)[number];

export const accessScopeTasks: Readonly<Record<AccessScope, string>> = {
  read: 'Read studies, experiments, imports and figures, and download templates and files.',
  import: 'Bring data files in. Needs a role that enters data.'
};
