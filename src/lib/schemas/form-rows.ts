import { formObject } from './form-object';

/** The rows of a list in a form in which one of the named fields was filled in; the others were offered and left empty. */
export function filledRows(rows: unknown, ...fields: readonly string[]): readonly Record<string, unknown>[] {
  if (!Array.isArray(rows)) return [];
  return (rows as Record<string, unknown>[]).filter((row) =>
    fields.some((field) => typeof row[field] === 'string' && row[field].trim() !== '')
  );
}

/** Fields as they were sent, by their names, as one object; see `formObject`. */
export function fieldsObject(fields: Readonly<Record<string, string>>): Record<string, unknown> {
  const data = new FormData();
  for (const [name, value] of Object.entries(fields)) data.append(name, value);
  return formObject(data);
}
