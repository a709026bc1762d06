import type { Actor } from '../../domain/actor';
import { Unauthenticated } from '../errors';

/** The member that the request hook found, for routes that only members reach. @throws Unauthenticated */
export function memberIn(locals: Readonly<{ actor: Actor | null }>): Actor {
  if (locals.actor === null) throw new Unauthenticated();
  return locals.actor;
}
