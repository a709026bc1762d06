import { createHash } from 'node:crypto';
import { isIPv6 } from 'node:net';
import type { RateLimiterPostgres } from 'rate-limiter-flexible';
import { sequelize } from '../db/sequelize';
import { countedLimit, spendPoint } from './counted-limit';

/** What is limited. A person at the keyboard stays far below; a program that guesses does not. */
const limits = {
  'sign-in': { perEmail: 10, perAddress: 100, minutes: 15 },
  'forgot-password': { perEmail: 4, perAddress: 40, minutes: 60 },
  'own-password': { perEmail: 10, perAddress: 100, minutes: 15 }
} as const;

export type AttemptKind = keyof typeof limits;

/** Who tries: the e-mail address named in the form, and the network address it came from. */
export interface Attempt {
  readonly email: string;
  readonly address: string;
}

/** The part of a network address that one subscriber holds: all of IPv4, the first 64 bits of IPv6. */
export function subscriberOf(address: string): string {
  const plain = address.replace(/^::ffff:(?=\d+\.)/i, '').replace(/%.*$/, '');
  if (!isIPv6(plain)) return plain;
  const [head = '', tail] = plain.toLowerCase().split('::');
  const left = head === '' ? [] : head.split(':');
  const right = !tail ? [] : tail.split(':');
  const zeros = tail === undefined ? [] : Array.from({ length: 8 - left.length - right.length }, () => '0');
  return [...left, ...zeros, ...right]
    .slice(0, 4)
    .map((group) => group.replace(/^0+(?=.)/, ''))
    .join(':');
}

/** The keys are hashed: people type passwords into the wrong field, and the table should not learn them. */
const keyOf = (text: string): string => createHash('sha256').update(text).digest('base64url');

const limiter = (kind: AttemptKind, by: 'perEmail' | 'perAddress'): RateLimiterPostgres =>
  countedLimit(`${kind}-${by}`, { points: limits[kind][by], seconds: limits[kind].minutes * 60 });

/**
 * Counts an attempt before it is made, so that many at once cannot slip past.
 * @throws TooManyRequests with the seconds to wait
 */
export async function spendAttempt(kind: AttemptKind, { email, address }: Attempt): Promise<void> {
  await spendPoint(limiter(kind, 'perAddress'), keyOf(subscriberOf(address)));
  await spendPoint(limiter(kind, 'perEmail'), keyOf(email));
}

/** Clears what an e-mail address had used up. */
export async function clearAttempts(kind: AttemptKind, email: string): Promise<void> {
  await limiter(kind, 'perEmail').delete(keyOf(email));
}

/** Takes an attempt that succeeded off the count, and clears what the e-mail address had used up. */
export async function forgiveAttempt(kind: AttemptKind, { email, address }: Attempt): Promise<void> {
  await clearAttempts(kind, email);
  await limiter(kind, 'perAddress').reward(keyOf(subscriberOf(address)));
  // Nothing else tidies the table.
  await sequelize.query('DELETE FROM attempt_limits WHERE expire < $1', { bind: [Date.now()] });
}
