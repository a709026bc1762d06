import { z } from 'zod';
import type { AccessScope } from '../domain/access-scopes';

/** For how many days a key can be made; `never`: until it is revoked. */
export const keyLifetimes = ['30', '90', '365', 'never'] as const;

const ticked = z
  .string()
  .optional()
  .transform((value) => value === 'on');

/** One tick a scope, since a form without JavaScript sends each by its own name. */
export const accessKeyForm = z
  .object({
    name: z
      .string('Name the key after the program or computer that will hold it.')
      .transform((text) => text.replaceAll('\u0000', '').trim())
      .pipe(
        z
          .string()
          .min(1, 'Name the key after the program or computer that will hold it.')
          .max(80, 'At most 80 characters.')
      ),
    read: ticked,
    import: ticked,
    days: z
      .enum(keyLifetimes, 'Choose how long the key works.')
      .transform((days) => (days === 'never' ? null : Number(days)))
  })
  .transform(({ name, days, ...may }, context) => {
    const scopes: AccessScope[] = [
      ...(may.read ? (['read'] as const) : []),
      ...(may.import ? (['import'] as const) : [])
    ];
    if (scopes.length === 0) {
      context.issues.push({
        code: 'custom',
        path: ['scopes'],
        message: 'Tick what the key may do.',
        input: scopes
      });
    }
    return { name, scopes, days };
  });
export type AccessKeyForm = z.infer<typeof accessKeyForm>;

export const revokeKeyForm = z.object({ key: z.uuid('This key is not known here.') });
