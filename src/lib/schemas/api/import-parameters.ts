import { z } from 'zod';
import { reportedBases } from '../../domain/vocabulary';

const whole = (text: string) => z.coerce.number(text).int(text).min(1, text).max(999_999, text);

/**
 * How a program says what a file is, beside its bytes: in the address, or as fields of a form. What is not known here is
 * refused, since a parameter that was misspelt and passed over could change what the numbers mean.
 */
export const importParameters = z.strictObject({
  file: z
    .string()
    .trim()
    .min(1, 'Name the file.')
    .max(255, 'At most 255 characters.')
    .optional()
    .meta({ description: 'Name of the file, when the body is the file itself: "areas.xlsx".' }),
  experiment: whole('An experiment is named by its number.')
    .optional()
    .meta({ description: 'Number of the experiment whose sample names are looked up first.' }),
  basis: z
    .enum(reportedBases, `One of ${reportedBases.join(', ')}.`)
    .optional()
    .meta({
      description:
        'What the numbers are, where the file does not say: peak area, ng/mL in the vial, ng in the whole fraction, ng/L of sample.'
    }),
  decimal: z
    .enum(['point', 'comma'], 'One of point, comma.')
    .optional()
    .meta({ description: 'The decimal mark of numbers that stand as text, where the file leaves it open.' }),
  map: z
    .string()
    .trim()
    .min(1, 'Name the column map, or leave the parameter out.')
    .max(120, 'At most 120 characters.')
    .optional()
    .meta({
      description: 'Name of a saved column map. Without it the layout is recognised by its header.'
    }),
  mapVersion: whole('A version of a column map is a whole number.')
    .optional()
    .meta({ description: 'Version of the column map; the newest when left out.' }),
  store: z
    .enum(['true', 'false'], 'One of true, false.')
    .default('true')
    .transform((value) => value === 'true')
    .meta({ description: '"false": receive and check the file, and store nothing yet.' }),
  confirm: z
    .string()
    .default('')
    .transform((text) =>
      text
        .split(',')
        .map((code) => code.trim())
        .filter((code) => code !== '')
    )
    .meta({
      description:
        'Codes of the questions that are answered by taking the values as they stand, parted by commas: "zero-area,negative".'
    }),
  reason: z
    .string()
    .max(1000, 'Keep the reason under 1,000 characters.')
    .default('')
    .meta({ description: 'Why values that are on record are covered; needed when any are.' })
});
export type ImportParameters = z.infer<typeof importParameters>;
