import { z } from 'zod';
import { patternFault } from '../domain/sample-pattern';

/**
 * How a spreadsheet is to be read, as plain data: it is recognised from a file, shown over the sheet, changed by a person,
 * saved under a name and applied to the next file of the same layout. It names things by their names and never by ids of a study,
 * so that a lab can use one map in all its studies.
 *
 * Rows and columns are zero-based. In the orientation `analytes down` the sheet is read turned: its columns are the lines that
 * hold one sample each, and its rows have the meanings; `headerLines`, `leftOut` and `column` then count that way.
 */

/** What a column can mean. `ignored` is a choice, `not understood` a lack of one. */
export const columnMeanings = [
  'sample',
  'experiment',
  'fraction',
  'analyte',
  'cas',
  'area',
  'internal standard area',
  'amount',
  'limit',
  'dilution',
  'final volume',
  'aliquot share',
  'injection',
  'acquired at',
  'retention time',
  'ion ratio',
  'signal to noise',
  'manual integration',
  'manual integration cause',
  'sample volume',
  'sample mass',
  'ignored',
  'not understood'
] as const;
export type ColumnMeaning = (typeof columnMeanings)[number];

/** What an instrument says of one result beside its area or amount. */
export const besideMeanings = [
  'internal standard area',
  'limit',
  'retention time',
  'ion ratio',
  'signal to noise',
  'manual integration',
  'manual integration cause'
] as const satisfies readonly ColumnMeaning[];

/** Meanings of which one column can be given for each analyte. */
export const perAnalyteMeanings = [
  'area',
  'amount',
  ...besideMeanings
] as const satisfies readonly ColumnMeaning[];

/**
 * `long`: a row for each injection and analyte. `analytes across`: a row for each injection, a column for each analyte.
 * `analytes down`: a column for each injection, a row for each analyte.
 */
export const orientations = ['long', 'analytes across', 'analytes down'] as const;
export type Orientation = (typeof orientations)[number];

export const carriedNames = ['sample', 'fraction', 'analyte'] as const;
export type CarriedName = (typeof carriedNames)[number];

export const dateOrders = ['year-month-day', 'day-month-year', 'month-day-year'] as const;
export type DateOrder = (typeof dateOrders)[number];

const line = z.number().int().min(0).max(1_048_575);
const shortText = z.string().max(300);

const mapColumn = z.object({
  column: line,
  /** As found, so that the column is known again in the next file; '' where it has none. */
  header: shortText,
  means: z.enum(columnMeanings),
  /** Name of the analyte the column is about; null: the row, the sheet or a title names it, or it concerns the whole row. */
  analyte: shortText.nullable(),
  /** Of an `amount` only: what it is an amount of; null: not known, which is asked. */
  basis: z.enum(['vial', 'ng', 'ng_per_l']).nullable(),
  /** null: none stated. */
  unit: z.string().max(40).nullable()
});
export type MapColumn = Readonly<z.infer<typeof mapColumn>>;

const carried = z.discriminatedUnion('from', [
  z.object({ names: z.enum(carriedNames), from: z.literal('sheet name') }),
  /** The same cell of each sheet of the family. */
  z.object({ names: z.enum(carriedNames), from: z.literal('title cell'), row: line, column: line }),
  /** The title of each block. */
  z.object({ names: z.enum(carriedNames), from: z.literal('block title') })
]);
export type Carried = Readonly<z.infer<typeof carried>>;

const tableMap = z.object({
  /** Names of the sheets that are read alike. */
  sheets: z.array(shortText).min(1).max(300),
  orientation: z.enum(orientations),
  /** The one or two lines that head the columns; what is read begins below the last. */
  headerLines: z.array(line).min(1).max(2),
  columns: z.array(mapColumn).max(16_384),
  /** What rows do not say because the sheet, a title or the block says it for all of them. */
  carried: z.array(carried).max(3),
  /**
   * Whether blank lines part the sheet into blocks with a title each: `repeat their header`, or `share one header`, the first;
   * null: one table.
   */
  blocks: z.enum(['repeat their header', 'share one header']).nullable(),
  /** Lines that are not read (a mean, a remark). */
  leftOut: z.array(line).max(10_000),
  /** Of its headers and orientation, as recognised; names of analytes do not count. */
  fingerprint: z.string().max(64)
});
export type TableMap = Readonly<z.infer<typeof tableMap>>;

/** "{sample}_{fraction}_{injection}": see the domain's `patternFault`. */
export const samplePattern = z
  .string()
  .trim()
  .max(200, 'Keep the pattern under 200 characters.')
  .superRefine((text, context) => {
    const fault = patternFault(text);
    if (fault !== null) context.addIssue({ code: 'custom', message: fault });
  });

export const columnMap = z.object({
  version: z.literal(1),
  tables: z.array(tableMap).max(300),
  /** How a label is taken apart; null: labels are names of samples as they stand. */
  samplePattern: samplePattern.nullable(),
  /** False while the pattern is a suggestion that nobody looked at: the reading then asks. */
  isPatternConfirmed: z.boolean(),
  /** `run order`: the labels mean the places of the run, one after the other, whatever they say. */
  matching: z.enum(['names', 'run order']),
  /** Which mark parts the decimals in cells that are text; null: as the cells prove. */
  decimal: z.enum(['point', 'comma']).nullable(),
  /** Of times that are text; null: as the cells prove. */
  dateOrder: z.enum(dateOrders).nullable(),
  /** What neither rows nor sheets say; names, null: nothing fixed. */
  fixed: z.object({ experiment: shortText.nullable(), fraction: shortText.nullable() })
});
export type ColumnMap = Readonly<z.infer<typeof columnMap>>;
