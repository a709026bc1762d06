import { z } from 'zod';
import { optionalNumber, optionalQuantity } from './fields';

export const chemistryOrders = ['pka', 'name', 'panel'] as const;

/** What the page of a panel's chemistry, its table and its API answer can be asked for; null leaves it to the study. */
export const chemistryParameters = z.object({
  /** The pH at which shares and log D are formed. */
  ph: optionalNumber({ least: 0, most: 14 }),
  /** Suspended solids of the sample, mg/L. */
  solids: optionalNumber({ least: 0, most: 1_000_000 }),
  /** What the bed is made of, which says what pH it stands. */
  phase: z.enum(['c18', 'polymer'], 'The bed is c18 or polymer.').default('c18')
});
export type ChemistryParameters = z.output<typeof chemistryParameters>;

/** A bed to estimate a breakthrough volume for. */
export const bedParameters = z.object({
  /** Mass of the sorbent, mg. */
  bed: optionalNumber({ above: 0, most: 100_000 }),
  /** Theoretical plates of the bed. */
  plates: optionalNumber({ least: 1, most: 10_000 }),
  /** Loss that is accepted, percent of the sample. */
  loss: optionalNumber({ least: 0.001, most: 50 }),
  volume: optionalQuantity('mL', { above: 0, most: 1_000_000 })
});
export type BedParameters = z.output<typeof bedParameters>;

export const chemistryPageQuery = chemistryParameters.extend(bedParameters.shape).extend({
  order: z.enum(chemistryOrders).catch('pka'),
  /** Panel entry whose chemistry is open. */
  analyte: z.uuid().optional().catch(undefined),
  table: z.literal('shown').optional().catch(undefined)
});
export type ChemistryPageQuery = z.output<typeof chemistryPageQuery>;

/**
 * Reads an address as far as it can be read: a field that cannot counts as not given, and what is wrong with it is said
 * under its name.
 */
export function readChemistryPage(fields: Readonly<Record<string, string>>): {
  readonly query: ChemistryPageQuery;
  readonly errors: Readonly<Record<string, string>>;
} {
  const first = chemistryPageQuery.safeParse(fields);
  if (first.success) return { query: first.data, errors: {} };
  const errors: Record<string, string> = {};
  for (const issue of first.error.issues) errors[String(issue.path[0])] ??= issue.message;
  const readable = Object.fromEntries(Object.entries(fields).filter(([name]) => !(name in errors)));
  return { query: chemistryPageQuery.parse(readable), errors };
}
