import { z } from 'zod';
import { checkStandardKinds } from '../domain/vocabulary';
import { optionalQuantity, optionalText, requiredText, seenVersion } from './fields';

export const checkStandardForm = z.object({
  kind: z.enum(checkStandardKinds, 'Choose what it is.'),
  label: requiredText('Give the label that the sample column has for it, such as CCV.', 80),
  source: optionalText(300),
  note: optionalText(1000),
  /** Of every analyte that the levels hold and that has no concentration of its own here. */
  concentrationNgPerMl: optionalQuantity('ng/mL'),
  /** By panel entry. 0: it does not hold it. */
  concentrations: z.record(z.uuid(), optionalQuantity('ng/mL', { least: 0 })).default({})
});
export type CheckStandardForm = z.output<typeof checkStandardForm>;

export const checkStandardChange = checkStandardForm.and(z.object({ seenVersion }));
export type CheckStandardChange = z.output<typeof checkStandardChange>;
