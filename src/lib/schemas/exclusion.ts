import { z } from 'zod';
import { optionalId, requiredText } from './fields';

const cause = requiredText('Say why: it stays on record with your name.', 1000).refine(
  (text) => text.length >= 3,
  'Say a little more: a later reader has only this to go by.'
);

export const exclusionForm = z.object({
  replicateId: z.uuid('This preparation is not known here.'),
  /** Nothing: the whole preparation. */
  fractionId: optionalId,
  /** Nothing: every analyte. */
  analyteId: optionalId,
  cause
});
export type ExclusionForm = z.output<typeof exclusionForm>;

export const liftForm = z.object({ exclusionId: z.uuid('This exclusion is not known here.'), reason: cause });
export type LiftForm = z.output<typeof liftForm>;
