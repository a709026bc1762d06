import { z } from 'zod';
import { emailAddress, personName } from './people';

export const passwordMinimum = 12;
/** Far beyond any passphrase; hashing something endless would only cost time. */
export const passwordMaximum = 200;
const distinctMinimum = 5;

/** The rule in words, shown under the field before anything is typed. */
export const passwordHint = `At least ${passwordMinimum} characters, and not your e-mail address. A few unrelated words do well.`;

/** The parts of a person that a password must not be made of. */
interface Owner {
  readonly email?: string | undefined;
  readonly name?: string | undefined;
}

const letters = (text: string): string => text.toLowerCase().replace(/[^\p{L}\p{N}]/gu, '');

/** The password is nothing but the address, its mailbox or the name, with at most a few signs around it. */
function isMadeOf(password: string, owner: Owner): boolean {
  const typed = letters(password);
  const parts = [owner.email, owner.email?.split('@')[0], owner.name]
    .map((part) => letters(part ?? ''))
    .filter((part) => part.length >= 3);
  return parts.some((part) => typed.includes(part) && typed.length - part.length < 6);
}

/**
 * What a new password must be. Length counts, composition does not: no digit or capital is demanded,
 * but the address, the name and a few repeated characters are refused.
 * Reasoning after NIST SP 800-63B, section 5.1.1.2 (length over composition, context words refused; from memory).
 */
export function newPassword(owner: Owner = {}): z.ZodType<string> {
  return z.string('Enter a new password.').superRefine((password, context) => {
    const length = [...password].length;
    const problem =
      length < passwordMinimum
        ? `This has ${length} characters; at least ${passwordMinimum} are needed.`
        : length > passwordMaximum
          ? `This has ${length} characters; at most ${passwordMaximum} are taken.`
          : isMadeOf(password, owner)
            ? 'This is close to your e-mail address or name, which is tried first by others. Choose something unrelated.'
            : new Set(password).size < distinctMinimum
              ? `This repeats fewer than ${distinctMinimum} different characters. Choose something longer to guess.`
              : null;
    if (problem) context.addIssue({ code: 'custom', message: problem });
  });
}

export const signInForm = z.object({
  email: emailAddress,
  // No rule here but that something was typed: an old password is what it is.
  password: z
    .string('Enter your password.')
    .min(1, 'Enter your password.')
    .max(1000, 'This is longer than any password here.')
});

export const forgottenForm = z.object({ email: emailAddress });

const repeated = <Shape extends { password: z.ZodType<string>; again: z.ZodType<string> }>(shape: Shape) =>
  z.object(shape).refine((form) => Reflect.get(form, 'password') === Reflect.get(form, 'again'), {
    path: ['again'],
    message: 'The two passwords differ. Type the same one twice.'
  });

const again = z.string('Type the new password again.');

/** A new password, typed twice, for the holder of a reset link. */
export const resetForm = (owner: Owner) => repeated({ password: newPassword(owner), again });

/** A new password beside the present one. */
export const changeForm = (owner: Owner) =>
  repeated({
    current: z.string('Enter your present password.').min(1, 'Enter your present password.'),
    password: newPassword(owner),
    again
  });

/** Name and password of a person who accepts an invitation and has no account yet. */
export const acceptForm = (owner: Owner) =>
  repeated({ name: personName, password: newPassword(owner), again });
