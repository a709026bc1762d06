import { fail, type ActionFailure } from '@sveltejs/kit';
import type { z } from 'zod';
import { Conflict, Forbidden, Invalid, TooManyRequests } from './errors';

/** What a page gets back when a form was not taken: what was typed, and what is wrong with it. */
export interface FormTrouble {
  /** As typed, without the secret fields. */
  readonly values: Readonly<Record<string, string>>;
  /** The first problem of each field. */
  readonly errors: Readonly<Record<string, string>>;
  /** What concerns the whole form. */
  readonly message: string | null;
}

type Fields = Readonly<Record<string, string>>;

const secretFields: ReadonlySet<string> = new Set(['password', 'again', 'current']);

/**
 * Checks fields against a schema.
 * @throws Invalid with every problem, at the paths of its fields
 */
export function checked<Value>(schema: z.ZodType<Value>, fields: unknown): Value {
  const result = schema.safeParse(fields);
  if (result.success) return result.data;
  throw new Invalid(
    result.error.issues.map((issue) => ({ path: issue.path.join('.'), message: issue.message }))
  );
}

function trouble(error: unknown, values: Fields): ActionFailure<FormTrouble> {
  if (error instanceof Invalid) {
    const errors: Record<string, string> = {};
    for (const { path, message } of error.problems) errors[path] ??= message;
    return fail(error.status, { values, errors, message: null });
  }
  if (error instanceof Conflict || error instanceof TooManyRequests || error instanceof Forbidden) {
    return fail(error.status, { values, errors: {}, message: error.message });
  }
  throw error;
}

/**
 * Runs a form action. Foreseen failures come back to the form with what was typed (never with a password);
 * everything else, redirects included, is passed on. `form` is the whole form, for those with files.
 */
export async function answerForm<Result>(
  request: Request,
  work: (fields: Fields, form: FormData) => Promise<Result>
): Promise<Result | ActionFailure<FormTrouble>> {
  const form = await request.formData();
  const fields = textFields(form);
  try {
    return await work(fields, form);
  } catch (error) {
    return trouble(error, typedFields(form));
  }
}

const textFields = (form: FormData): Record<string, string> =>
  Object.fromEntries([...form].filter((entry): entry is [string, string] => typeof entry[1] === 'string'));

/** What was typed into a form, to be given back to it: without files, and without passwords. */
export function typedFields(form: FormData): Fields {
  return Object.fromEntries(Object.entries(textFields(form)).filter(([name]) => !secretFields.has(name)));
}
