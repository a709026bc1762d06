import { validate } from 'uuid';
import { NotFound } from '../errors';

/** An id from an address or a form: what cannot be one is not found, like one that is not there. @throws NotFound */
export function knownId(id: string): string {
  if (!validate(id)) throw new NotFound();
  return id;
}
