import { z } from 'zod';
import { subjectParameters } from '../findings';

/** The number of an experiment as it stands in an address. */
export const experimentNumber = z
  .string()
  .regex(/^\d{1,6}$/)
  .transform(Number);

export const templateParameters = z.strictObject({
  layout: z
    .enum(['long', 'wide'], 'One of long, wide.')
    .default('long')
    .meta({ description: 'long: a row for each sample, fraction and analyte; wide: analytes across.' })
});

export const resultsParameters = subjectParameters.extend({
  format: z
    .enum(['json', 'csv'], 'One of json, csv.')
    .default('json')
    .meta({ description: 'csv: the same figures as a table, for programs that read no JSON.' })
});
