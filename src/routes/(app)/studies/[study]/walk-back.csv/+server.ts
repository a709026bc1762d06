import { subjectParameters } from '$lib/schemas/findings';
import { checked } from '$lib/server/form-answer';
import { memberIn } from '$lib/server/hooks/member-in';
import { attachment } from '$lib/server/http/attachment';
import { walkBackCsv } from '$lib/server/reports/findings-csv';
import { walkBackView } from '$lib/server/services/results';
import type { RequestHandler } from './$types';

/** What each stage of a variant takes, unrounded. */
export const GET: RequestHandler = async ({ locals, params, url }) => {
  const actor = memberIn(locals);
  const query = checked(subjectParameters, Object.fromEntries(url.searchParams));
  const { walkBack, subject } = await walkBackView(actor, params.study, query, (address) => address);
  const { labName, labIsDemo } = actor;
  const text = walkBackCsv(walkBack, subject, { study: params.study, labName, labIsDemo });
  const which = subject.variant ? `variant-${subject.variant.code}` : 'no-variant';
  return attachment(
    `${params.study}-${which}-walk-back.csv`,
    new TextEncoder().encode(text),
    'text/csv; charset=utf-8'
  );
};
