import type { Actor } from '../../domain/actor';
import { isAllowed, type Permission } from '../../domain/permissions';
import { refusalSentence } from '../auth/refusal';
import { Forbidden } from '../errors';

/**
 * The first line of every service function.
 * @throws Forbidden when the actor's role in this lab does not hold the permission
 */
export function require(actor: Actor, permission: Permission): void {
  if (!isAllowed(actor.role, permission)) throw new Forbidden(refusalSentence(actor.role, permission));
}
