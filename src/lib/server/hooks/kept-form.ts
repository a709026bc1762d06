import { stringify } from 'devalue';
import { typedFields, type FormTrouble } from '../form-answer';

/** True for a form that the page sent by script, and whose answer the page applies to itself. */
export const isEnhancedForm = (request: Request): boolean =>
  request.method === 'POST' && request.headers.get('x-sveltekit-action') === 'true';

/**
 * Answers a form that was sent after the session had ended: the page stays, with what was typed in it, and says how to go
 * on. (A form sent without script can only be led to the sign-in page.)
 */
export async function keepForm(request: Request): Promise<Response> {
  const form = await request.formData().catch(() => new FormData());
  const trouble: FormTrouble = {
    values: typedFields(form),
    errors: {},
    message:
      'Your session has ended, and nothing was stored. Sign in again in another tab; then send this form once more: what you typed is still here.'
  };
  return Response.json({ type: 'failure', status: 401, data: stringify(trouble) });
}
