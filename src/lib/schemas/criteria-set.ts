import { z } from 'zod';
import { ruleTypes } from '../domain/criteria';
import { optionalNumber, optionalText, requiredText, wholeNumber } from './fields';

export const ruleForm = z
  .object({
    type: z.enum(ruleTypes, 'Choose what the rule is about.'),
    low: optionalNumber(),
    high: optionalNumber(),
    unit: z.enum(['%', 'count', '1', 'h'], 'Choose the unit.'),
    citation: requiredText('Name the document and the section, or "the lab\'s own".', 500),
    year: optionalNumber({ least: 1900, most: 2200 }),
    standing: z.enum(['seen', 'memory', 'own'], 'Say whether the document was read for this.'),
    note: optionalText(1000).transform((text) => text || null)
  })
  .superRefine((rule, context) => {
    const add = (path: string, message: string) =>
      context.addIssue({ code: 'custom', path: [path], message });
    if (rule.low === null && rule.high === null) add('low', 'Give a low limit, a high one, or both.');
    if (rule.low !== null && rule.high !== null && rule.low > rule.high)
      add('high', 'Must not be below the low limit.');
    if (rule.type === 'mean recovery' && (rule.low === null || rule.high === null)) {
      add('high', 'A mean recovery is held between two limits.');
    }
  });

export const criteriaSetForm = z
  .object({
    name: requiredText('Name the set after what it is for.', 200),
    rules: z.array(ruleForm).min(1, 'A set needs at least one rule.').max(60)
  })
  .superRefine(({ rules }, context) => {
    const seen = new Set<string>();
    // What a mean and its RSD are held against has to be one rule each.
    const judged = new Set<string>([
      'mean recovery',
      'relative standard deviation',
      'minimum preparations',
      'surrogate recovery'
    ]);
    for (const [index, { type }] of rules.entries()) {
      if (seen.has(type) && judged.has(type)) {
        context.addIssue({
          code: 'custom',
          path: ['rules', index, 'type'],
          message: `There is already a rule for ${type}.`
        });
      }
      seen.add(type);
    }
    if (!seen.has('mean recovery')) {
      context.addIssue({
        code: 'custom',
        path: ['rules'],
        message: 'Without a rule for the mean recovery nothing can be judged.'
      });
    }
  });
export type CriteriaSetForm = z.output<typeof criteriaSetForm>;

export const criteriaVersionForm = criteriaSetForm.and(
  z.object({
    seenVersion: wholeNumber('The version that was opened is missing. Reload the page.', { least: 1 })
  })
);
export type CriteriaVersionForm = z.output<typeof criteriaVersionForm>;
