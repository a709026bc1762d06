import { formObject } from '$lib/schemas/form-object';
import { filledRows } from '$lib/schemas/form-rows';
import type { CriteriaSetBrief } from '$lib/views/library';

/** What the form of a criteria set sent, without the rows that were left empty. */
export function criteriaBody(data: FormData): Record<string, unknown> {
  const sent = formObject(data);
  return { ...sent, rules: filledRows(sent.rules, 'low', 'high', 'citation') };
}

/** A version of a criteria set as the fields of its form. */
export function criteriaFields({ name, rules }: CriteriaSetBrief): Record<string, string> {
  const fields = rules.flatMap((rule, index) =>
    Object.entries(rule).map(([field, value]) => [`rules.${index}.${field}`, String(value ?? '')])
  );
  return { name, ...Object.fromEntries(fields) };
}
