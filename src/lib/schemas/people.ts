import { z } from 'zod';
import { roles } from '../domain/roles';

/** What a person types as an e-mail address: spaces around it and capitals do not count. */
export const emailAddress = z
  .string('Enter an e-mail address, such as name@example.org.')
  .trim()
  .toLowerCase()
  .max(254, 'An e-mail address has at most 254 characters.')
  .pipe(z.email('Enter an e-mail address, such as name@example.org.'));

export const personName = z
  .string('Enter a name.')
  .trim()
  .min(1, 'Enter a name, as it should stand beside signatures and exclusions.')
  .max(120, 'A name has at most 120 characters.');

export const invitationForm = z.object({
  email: emailAddress,
  role: z.enum(roles, 'Choose one of the four roles.')
});
export type InvitationForm = z.infer<typeof invitationForm>;

export const roleChangeForm = z.object({
  userId: z.uuid('This member is not known here.'),
  role: z.enum(roles, 'Choose one of the four roles.')
});
export type RoleChangeForm = z.infer<typeof roleChangeForm>;

export const ownNameForm = z.object({ name: personName });

export const labNameForm = z.object({
  name: z
    .string('Enter the name of the lab.')
    .trim()
    .min(1, 'Enter the name of the lab, as summaries should carry it.')
    .max(120, 'The name of a lab has at most 120 characters.')
});
