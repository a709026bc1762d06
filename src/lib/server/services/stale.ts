import { Conflict } from '../errors';

/**
 * Refuses to save over a change that the person has not seen.
 * @throws Conflict with what is stored now
 */
export function requireUnchanged(
  what: string,
  seen: number | string,
  stored: number | string,
  current: unknown
): void {
  if (seen === stored) return;
  throw new Conflict(
    `Somebody changed ${what} after you opened it, so nothing of yours was stored yet. ` +
      'What you typed is still here; compare it with what is stored now.',
    current
  );
}
