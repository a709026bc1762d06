import { describe, expect, it } from 'vitest';
import { changeForm, newPassword, passwordMaximum, signInForm } from '../../../src/lib/schemas/passwords';

const owner = { email: 'marta.lind@weir.test', name: 'Marta Lind' };

function complaint(password: unknown): string | null {
  const result = newPassword(owner).safeParse(password);
  return result.success ? null : (result.error.issues[0]?.message ?? '');
}

describe('a new password', () => {
  it.each(['correct horse battery', 'Þórr-weir-19 tall', 'twelve chars', 'zwölf Zeichen…'])(
    'may be %s',
    (password) => {
      expect(complaint(password)).toBeNull();
    }
  );

  it('needs twelve characters, counted as people count them', () => {
    expect(complaint('eleven char')).toBe('This has 11 characters; at least 12 are needed.');
    expect(complaint('🌊🏔'.repeat(3))).toBe('This has 6 characters; at least 12 are needed.');
  });

  it('has an end', () => {
    expect(complaint('ab cd ef gh'.repeat(20))).toContain(`at most ${passwordMaximum}`);
  });

  it.each(['marta.lind@weir.test', 'MARTA.LIND@WEIR.TEST', 'Marta Lind 123', 'marta.lind1!', '12marta-lind'])(
    'may not be made of the address or the name: %s',
    (password) => {
      expect(complaint(password.padEnd(12, '!'))).toContain('close to your e-mail address or name');
    }
  );

  it('may hold the name among enough else', () => {
    expect(complaint('marta lind counts grey herons')).toBeNull();
  });

  it.each(['aaaaaaaaaaaaaa', 'abababababab', '111122223333'])(
    'may not repeat a few signs: %s',
    (password) => {
      expect(complaint(password)).toContain('different characters');
    }
  );

  it('has to be typed', () => {
    expect(complaint(undefined)).toBe('Enter a new password.');
  });

  it('typed twice differently is refused at the second field', () => {
    const typed = { current: 'the old one', password: 'grey herons wade', again: 'grey heron wades' };
    const result = changeForm(owner).safeParse(typed);
    expect(result.success).toBe(false);
    expect(result.error?.issues.map(({ path }) => path)).toEqual([['again']]);
    expect(changeForm(owner).safeParse({ ...typed, again: typed.password }).success).toBe(true);
  });
});

describe('the sign-in form', () => {
  it('takes capitals and spaces around an address, and any old password', () => {
    expect(signInForm.parse({ email: ' Marta.Lind@Weir.test ', password: 'x' })).toEqual({
      email: 'marta.lind@weir.test',
      password: 'x'
    });
  });
});
