import { validationParameters } from '$lib/schemas/validation';
import { checked } from '$lib/server/form-answer';
import { memberIn } from '$lib/server/hooks/member-in';
import { attachment } from '$lib/server/http/attachment';
import { validationCsv } from '$lib/server/reports/validation-csv';
import { validationView } from '$lib/server/services/validation';
import type { RequestHandler } from './$types';

/** Every figure of the validation, unrounded. */
export const GET: RequestHandler = async ({ locals, params, url }) => {
  const actor = memberIn(locals);
  const query = checked(validationParameters, Object.fromEntries(url.searchParams));
  const view = await validationView(actor, params.study, query, (address) => address);
  const text = validationCsv(view, {
    study: view.study,
    labName: actor.labName,
    labIsDemo: actor.labIsDemo
  });
  return attachment(
    `${view.study}-validation.csv`,
    new TextEncoder().encode(text),
    'text/csv; charset=utf-8'
  );
};
