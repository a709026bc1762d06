import { z } from 'zod';

const choice = z
  .string()
  .trim()
  .max(200)
  .optional()
  .transform((text) => text || null);
const day = z
  .union([z.iso.date(), z.literal('')])
  .optional()
  .catch('')
  .transform((text) => text || null);

/** Filters of the history page, as they stand in its address; what is not understood filters nothing. */
export const historyFilter = z.object({
  actor: choice,
  entity: choice,
  text: choice,
  from: day,
  to: day,
  before: z.coerce.number().int().positive().optional().catch(undefined)
});
export type HistoryFilter = z.output<typeof historyFilter>;
