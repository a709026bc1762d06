import { subjectParameters } from '$lib/schemas/findings';
import { checked } from '$lib/server/form-answer';
import { memberIn } from '$lib/server/hooks/member-in';
import { attachment } from '$lib/server/http/attachment';
import { balanceCsv } from '$lib/server/reports/findings-csv';
import { massBalanceView } from '$lib/server/services/results';
import type { RequestHandler } from './$types';

/** The mass balance of one experiment, every fraction, unrounded. */
export const GET: RequestHandler = async ({ locals, params, url }) => {
  const actor = memberIn(locals);
  const query = checked(subjectParameters, Object.fromEntries(url.searchParams));
  const { balance, subject } = await massBalanceView(actor, params.study, query, (address) => address);
  const { labName, labIsDemo } = actor;
  const text = balanceCsv(balance, subject, { study: params.study, labName, labIsDemo });
  const which = subject.experiment ? `experiment-${subject.experiment.number}` : 'no-experiment';
  return attachment(
    `${params.study}-${which}-mass-balance.csv`,
    new TextEncoder().encode(text),
    'text/csv; charset=utf-8'
  );
};
