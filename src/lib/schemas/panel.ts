import { z } from 'zod';
import { panelRoles } from '../domain/vocabulary';
import { optionalId, optionalNumber, optionalText, requiredText } from './fields';

export const panelPasteForm = z.object({
  text: requiredText('Paste or type names or CAS numbers, one a line.', 100_000),
  role: z.enum(panelRoles, 'Choose the role of these analytes.')
});
export type PanelPasteForm = z.output<typeof panelPasteForm>;

export const panelEntryForm = z
  .object({
    entryId: z.uuid('This entry is not known here.'),
    /** When the entry was last changed, as the person saw it. */
    seen: z.string(),
    role: z.enum(panelRoles, 'Choose a role.'),
    internalStandardEntryId: optionalId,
    low: optionalNumber({ least: 0, most: 1000 }),
    high: optionalNumber({ least: 0, most: 1000 }),
    rsdMax: optionalNumber({ above: 0, most: 1000 }),
    nMin: optionalNumber({ least: 1, most: 1000 }),
    reason: optionalText(1000)
  })
  .superRefine((form, context) => {
    const given = [form.low, form.high, form.rsdMax, form.nMin].some((value) => value !== null);
    const add = (path: string, message: string) =>
      context.addIssue({ code: 'custom', path: [path], message });
    if (!given) {
      if (form.reason)
        add(
          'low',
          'A reason stands here, but no criterion. Give low, high and the least n, or clear the reason.'
        );
      return;
    }
    if (form.low === null) add('low', 'Give the lowest mean recovery, in %.');
    if (form.high === null) add('high', 'Give the highest mean recovery, in %.');
    if (form.nMin === null) add('nMin', 'Give the least number of preparations.');
    if (form.nMin !== null && !Number.isInteger(form.nMin)) add('nMin', 'Must be a whole number.');
    if (form.low !== null && form.high !== null && form.low >= form.high)
      add('high', 'Must be above the lowest.');
    if (!form.reason)
      add('reason', 'Say why this analyte has criteria of its own: the reason stands in the summary.');
  });
export type PanelEntryForm = z.output<typeof panelEntryForm>;
