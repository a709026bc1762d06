import { z } from 'zod';

const code = z.string().regex(/^[A-Za-z0-9]{1,8}$/, 'A variant is named by up to eight letters and digits.');
const number = z.coerce.number('An experiment is named by its number.').int().min(1).max(999_999);

/** Which variant or experiment a page of findings shows; what cannot be read counts as no wish. */
export const subjectQuery = z.object({
  variant: code.optional().catch(undefined),
  experiment: number.optional().catch(undefined)
});

export const massBalanceOrderNames = ['verdict', 'open', 'name', 'class', 'panel'] as const;

export const massBalanceQuery = subjectQuery.extend({
  order: z.enum(massBalanceOrderNames).catch('verdict'),
  /** Class of substance; empty: all. */
  group: z.string().max(80).catch(''),
  /** The table twin of a large chart comes when it is asked for. */
  table: z.literal('shown').optional().catch(undefined)
});

/** The same for programs: what cannot be read is refused. */
export const subjectParameters = z.object({ variant: code.optional(), experiment: number.optional() });

export const experimentParameters = z.object({ experiment: number });

export const figureParameters = z.object({
  figure: z.string('Name the figure to open, like recovery:3:… .').min(1).max(400)
});
