import { z } from 'zod';
import { validationParts } from '../domain/validation-parts';
import { optionalText, requiredText } from './fields';

const experimentNumber = z.coerce.number('An experiment is named by its number.').int().min(1).max(999_999);

/** Which experiments stand for a part of the validation; none: nobody chose, and a suggestion stands again. */
export const validationChoiceForm = z.object({
  part: z.enum(validationParts, 'There is no such part of a validation.'),
  /** Empty: for every variant. */
  variantCode: optionalText(8),
  experiments: z.array(experimentNumber).max(200),
  /** Numbers that were chosen when the page was opened. */
  seen: optionalText(2000),
  reason: requiredText('Say why these experiments stand for it.', 1000).pipe(
    z.string().min(3, 'Say why in a few words.')
  )
});
export type ValidationChoiceForm = z.output<typeof validationChoiceForm>;

export const duplicatePairForm = z.object({
  experimentNumber,
  first: z.uuid('Choose the first preparation.'),
  second: z.uuid('Choose the second preparation.'),
  reason: requiredText('Say how they were made as duplicates.', 1000).pipe(
    z.string().min(3, 'Say how in a few words.')
  )
});
export type DuplicatePairForm = z.output<typeof duplicatePairForm>;

export const pairRemovalForm = z.object({ pair: z.uuid('Name the pair.') });
export type PairRemovalForm = z.output<typeof pairRemovalForm>;

const code = z.string().regex(/^[A-Za-z0-9]{1,8}$/, 'A variant is named by up to eight letters and digits.');

/** What the page shows; what cannot be read counts as no wish. */
export const validationQuery = z.object({
  variant: code.optional().catch(undefined),
  /** A part whose tables come whole, or 'everything'. */
  all: z
    .enum([...validationParts, 'horwitz', 'everything'])
    .optional()
    .catch(undefined),
  choose: z.enum(validationParts).optional().catch(undefined)
});

/** The same for programs: what cannot be read is refused. */
export const validationParameters = z.object({ variant: code.optional() });
