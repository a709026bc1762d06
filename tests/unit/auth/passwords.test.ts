import { describe, expect, it } from 'vitest';
import { hashPassword, isPassword } from '../../../src/lib/server/auth/passwords';

describe('stored passwords', () => {
  it('are argon2id hashes with a salt of their own', async () => {
    const [first, second] = await Promise.all([
      hashPassword('grey herons wade'),
      hashPassword('grey herons wade')
    ]);
    expect(first).toMatch(/^\$argon2id\$v=19\$/);
    expect(first).not.toBe(second);
  });

  it('are told apart', async () => {
    const hash = await hashPassword('grey herons wade');
    expect(await isPassword('grey herons wade', hash)).toBe(true);
    expect(await isPassword('grey herons Wade', hash)).toBe(false);
    expect(await isPassword('', hash)).toBe(false);
  });

  it('are the same from a keyboard that composes its letters otherwise', async () => {
    const hash = await hashPassword('M\u00fchlenwehr am Bach');
    expect(await isPassword('Mu\u0308hlenwehr am Bach', hash)).toBe(true);
  });

  it('without a hash never match', async () => {
    expect(await isPassword('grey herons wade', null)).toBe(false);
  });
});
