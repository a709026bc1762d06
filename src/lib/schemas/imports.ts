import { z } from 'zod';
import { reportedBases } from '../domain/vocabulary';

/** The window of a preview, from the address. */
export const previewQuery = z.object({
  sheet: z.coerce.number().int().min(0).max(10_000).nullable().catch(null),
  fromRow: z.coerce.number().int().min(1).max(2_000_000).catch(1),
  fromRecord: z.coerce.number().int().min(0).max(10_000_000).catch(0)
});

/** What a person declares about a file. An empty choice means: as the file says. */
export const declareForm = z.object({
  basis: z
    .enum(['', ...reportedBases], 'Choose what the numbers are.')
    .default('')
    .transform((value) => (value === '' ? null : value)),
  decimal: z
    .enum(['', 'point', 'comma'], 'Choose point or comma.')
    .default('')
    .transform((value) => (value === '' ? null : value))
});

export const storeForm = z.object({
  questions: z
    .string()
    .default('')
    .transform((value) => value === 'confirmed'),
  reason: z.string().max(1000, 'Keep the reason under 1,000 characters.').default(''),
  /** Ids of imports whose place the file takes as a whole. */
  supersedes: z
    .union([z.string(), z.array(z.string())])
    .default([])
    .transform((ids) => (typeof ids === 'string' ? [ids] : ids))
});

export const withdrawForm = z.object({
  import: z.string(),
  reason: z.string().max(1000, 'Keep the reason under 1,000 characters.').default('')
});

export const uploadForm = z.object({
  experiment: z
    .string()
    .default('')
    .transform((text) => (/^\d{1,6}$/.test(text) ? Number(text) : null))
});
