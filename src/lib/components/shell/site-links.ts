import { isAllowed } from '../../domain/permissions';
import type { Role } from '../../domain/roles';
import type { NavigationItem } from './study-groups';

/** Pages beside the product's name. */
export const appLinks: readonly NavigationItem[] = [
  { href: '/studies', label: 'Studies' },
  { href: '/library', label: 'Library' },
  { href: '/help', label: 'Help' }
];

/** Pages in the person's menu, those that the role may open. */
export function personLinks(role: Role, labs = 1): readonly NavigationItem[] {
  return [
    { href: '/account', label: 'Your name and password' },
    ...(labs > 1 ? [{ href: '/account#labs', label: 'Switch lab', count: labs }] : []),
    { href: '/lab/members', label: 'Members' },
    { href: '/lab/access-keys', label: 'Access keys' },
    ...(isAllowed(role, 'lab.settings')
      ? [
          { href: '/lab/settings', label: 'Lab settings' },
          { href: '/lab/history', label: 'History of the lab' }
        ]
      : [])
  ];
}
