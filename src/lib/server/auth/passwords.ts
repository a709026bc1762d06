import { randomBytes } from 'node:crypto';
import { hash, verify } from '@node-rs/argon2';

/**
 * The same password typed on another keyboard can arrive in another Unicode form; NFKC makes them one
 * (NIST SP 800-63B, section 5.1.1.2, from memory).
 */
const normalised = (password: string): string => password.normalize('NFKC');

/** Hash of a password by argon2id (the library's default variant and costs), as one PHC string with its own salt. */
export async function hashPassword(password: string): Promise<string> {
  return hash(normalised(password));
}

let nobodysHash: Promise<string> | undefined;

/**
 * True when the password belongs to the hash. Without a hash (no such account) it works as long as
 * for a wrong password, so that the time taken does not tell which addresses have an account.
 */
export async function isPassword(password: string, passwordHash: string | null): Promise<boolean> {
  nobodysHash ??= hashPassword(randomBytes(24).toString('base64url'));
  const matches = await verify(passwordHash ?? (await nobodysHash), normalised(password));
  return passwordHash !== null && matches;
}
