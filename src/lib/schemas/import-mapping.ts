import { z } from 'zod';
import { carriedNames, columnMeanings, orientations, samplePattern } from './column-map';

const sheet = z.string().min(1).max(300);
const line = z.coerce.number().int().min(0).max(1_048_575);
const emptyIsNull = (text: string): string | null => (text === '' ? null : text);

/** What one column means. */
export const columnForm = z.object({
  sheet,
  column: line,
  means: z.enum(columnMeanings, 'Choose what the column means.'),
  analyte: z.string().trim().max(300).default('').transform(emptyIsNull),
  basis: z
    .enum(['', 'vial', 'ng', 'ng_per_l'])
    .default('')
    .transform((basis) => (basis === '' ? null : basis)),
  unit: z.string().trim().max(40, 'A unit has at most 40 signs.').default('').transform(emptyIsNull)
});

/** Where the header stands, which way the sheet runs, and what the rows do not say. Lines are typed as the sheet counts them, from 1. */
export const tableForm = z.object({
  sheet,
  orientation: z.enum(orientations, 'Choose which way the sheet runs.'),
  headerLine: z.coerce
    .number('Type the number of the line that holds the headers.')
    .int('Type the number of the line that holds the headers.')
    .min(1, 'Lines count from 1.')
    .max(1_048_576),
  twoLines: z
    .string()
    .default('')
    .transform((value) => value !== ''),
  blocks: z
    .enum(['', 'repeat their header', 'share one header'])
    .default('')
    .transform((value) => (value === '' ? null : value)),
  sample: z.string().max(40).default(''),
  fraction: z.string().max(40).default(''),
  analyte: z.string().max(40).default('')
} satisfies Record<(typeof carriedNames)[number], z.ZodType> & Record<string, z.ZodType>);

export const sheetForm = z.object({
  sheet,
  read: z.enum(['yes', 'no']).transform((value) => value === 'yes')
});

export const labelsForm = z.object({
  pattern: z.union([z.literal('').transform(() => null), samplePattern]).default(null),
  matching: z.enum(['names', 'run order']).default('names'),
  experiment: z.string().trim().max(300).default('').transform(emptyIsNull),
  fraction: z.string().trim().max(300).default('').transform(emptyIsNull)
});

/** What one sample label means: "replicate <id>", "level <id>", "check <id>", "left out", or '' for no choice. */
export const assignForm = z.object({
  label: z.string().min(1).max(2000),
  place: z.string().max(120).default(''),
  fraction: z.string().max(60).default('').transform(emptyIsNull)
});

export const mendForm = z.object({
  sheet,
  cell: z.string().regex(/^[A-Za-z]{1,3}[1-9]\d{0,6}$/, 'A cell is written as F18.'),
  text: z.string().max(1000, 'A mended cell holds at most 1,000 signs.').default('')
});

export const unmendForm = mendForm.pick({ sheet: true, cell: true });

export const keepMapForm = z.object({
  name: z
    .string()
    .trim()
    .min(1, 'Give the layout a name, such as the instrument that writes it.')
    .max(120, 'A name has at most 120 signs.')
});
