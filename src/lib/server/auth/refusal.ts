import { rolesAllowed, type Permission } from '../../domain/permissions';
import { roleLabels, type Role } from '../../domain/roles';

const withArticle = (role: Role): string =>
  `${role === 'analyst' ? 'an' : 'a'} ${roleLabels[role].toLowerCase()}`;

/** The sentence of a refusal: who may do it, and as whom the person is signed in. */
export function refusalSentence(role: Role, permission: Permission): string {
  const allowed = rolesAllowed(permission).map(withArticle);
  const last = allowed.at(-1) ?? 'nobody';
  const list = allowed.length > 1 ? `${allowed.slice(0, -1).join(', ')} or ${last}` : last;
  return `This takes ${list}. You are signed in as ${withArticle(role)}.`;
}
