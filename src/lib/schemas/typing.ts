import { z } from 'zod';
import { reportedBases } from '../domain/vocabulary';

export const typedCellLimit = 80;

const cellText = z
  .string()
  .max(typedCellLimit, `A cell holds at most ${typedCellLimit} signs.`)
  .transform((text) => text.trim());

/** Cells as typed, by row key and column key; an empty text takes a cell back. */
export const typedCells = z.record(z.string().max(120), z.record(z.string().max(80), cellText));

/** What a page sends to be kept: some of its cells. Without script they come as fields, with it as one text. */
export const keepForm = z.object({
  cells: z
    .preprocess((value) => {
      if (typeof value !== 'string') return value ?? {};
      try {
        return JSON.parse(value) as unknown;
      } catch {
        return null;
      }
    }, typedCells)
    .default({})
});

export const typingPlanForm = z.object({
  basis: z.enum(reportedBases, 'Choose what the numbers are.'),
  injections: z.coerce
    .number('Type how many injections.')
    .int('Whole injections only.')
    .min(1, 'At least one injection.')
    .max(6, 'The grid takes up to 6 injections of an extract; bring more with a file.')
});
