import { describe, expect, it } from 'vitest';
import { createToken, hashToken, isTokenShaped } from '../../../src/lib/server/auth/tokens';

describe('tokens', () => {
  it('are different each time and have 256 random bits', () => {
    const tokens = Array.from({ length: 200 }, createToken);
    expect(new Set(tokens.map(({ secret }) => secret)).size).toBe(200);
    expect(tokens.every(({ secret }) => Buffer.from(secret, 'base64url').length === 32)).toBe(true);
  });

  it('are found again by their hash, which does not hold them', () => {
    const { secret, hash } = createToken();
    expect(hashToken(secret)).toBe(hash);
    expect(hash).not.toContain(secret);
  });

  it('hash by SHA-256 (FIPS 180-4, example "abc")', () => {
    expect(hashToken('abc')).toBe('ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad');
  });

  it('are told from anything else by their form', () => {
    expect(isTokenShaped(createToken().secret)).toBe(true);
    expect(isTokenShaped('')).toBe(false);
    expect(isTokenShaped(`${createToken().secret}=`)).toBe(false);
    expect(isTokenShaped("' OR 1=1 --".padEnd(43))).toBe(false);
  });
});
