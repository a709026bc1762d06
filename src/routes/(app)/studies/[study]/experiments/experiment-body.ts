import { formObject } from '$lib/schemas/form-object';
import { filledRows } from '$lib/schemas/form-rows';

/**
 * What the experiment form sent, in the shape of its schema: rows that were offered and left empty are taken out, and each
 * fraction's ticked stages become a list.
 */
export function experimentBody(data: FormData): Record<string, unknown> {
  const sent = formObject(data);
  const fractions = filledRows(sent.fractions, 'name').map(({ passed, ...fraction }) => ({
    ...fraction,
    passedStages: Object.keys((passed as Record<string, unknown> | undefined) ?? {})
  }));
  return { ...sent, fractions, replicates: filledRows(sent.replicates, 'count', 'labels') };
}
