import { randomBytes, randomInt } from 'node:crypto';
import { hashToken } from './tokens';

/** A new access key, and what is kept of it. */
export interface NewAccessKey {
  /** The whole key: shown once, never stored or logged. */
  readonly key: string;
  /** Its beginning, by which people tell it from others; says nothing of the secret part. */
  readonly prefix: string;
  readonly hash: string;
}

const letters = 'abcdefghijkmnpqrstuvwxyz23456789';

/** Makes a key with 256 random bits behind its prefix: "hw_" and eight characters, then 43. */
export function createAccessKey(): NewAccessKey {
  const name = Array.from({ length: 8 }, () => letters[randomInt(letters.length)]).join('');
  const prefix = `hw_${name}`;
  const key = `${prefix}_${randomBytes(32).toString('base64url')}`;
  return { key, prefix, hash: hashToken(key) };
}

/** True when a text has the form of an access key; anything else need not be looked up. */
export function isAccessKeyShaped(text: string): boolean {
  return /^hw_[a-z2-9]{8}_[A-Za-z0-9_-]{43}$/.test(text);
}

/** What follows "Bearer" in an Authorization header; null for no header, or one of another scheme. */
export function bearerIn(header: string | null): string | null {
  const found = /^bearer(?:\s+(.*))?$/i.exec((header ?? '').trim());
  return found ? (found[1] ?? '') : null;
}
