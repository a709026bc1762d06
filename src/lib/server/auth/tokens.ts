import { createHash, randomBytes } from 'node:crypto';

/** A one-time secret for a link, and what the database keeps of it. */
export interface Token {
  /** Goes into the link and nowhere else. */
  readonly secret: string;
  readonly hash: string;
}

/** SHA-256 in hex. The secret has 256 random bits, so a slow hash would add nothing. */
export function hashToken(secret: string): string {
  return createHash('sha256').update(secret).digest('hex');
}

/** A new token of 32 random bytes, as 43 characters that need no escaping in an address. */
export function createToken(): Token {
  const secret = randomBytes(32).toString('base64url');
  return { secret, hash: hashToken(secret) };
}

/** True when a text has the form of a token; anything else need not be looked up. */
export function isTokenShaped(text: string): boolean {
  return /^[A-Za-z0-9_-]{43}$/.test(text);
}
