import { subjectParameters } from '$lib/schemas/findings';
import { NotFound } from '$lib/server/errors';
import { checked } from '$lib/server/form-answer';
import { memberIn } from '$lib/server/hooks/member-in';
import { attachment } from '$lib/server/http/attachment';
import { resultsCsv } from '$lib/server/reports/results-csv';
import { resultsTableView } from '$lib/server/services/results';
import type { RequestHandler } from './$types';

/** The method recoveries of one experiment, unrounded. */
export const GET: RequestHandler = async ({ locals, params, url }) => {
  const actor = memberIn(locals);
  const query = checked(subjectParameters, Object.fromEntries(url.searchParams));
  const { results } = await resultsTableView(actor, params.study, query, (address) => address);
  if (!results) throw new NotFound('The study has no experiment yet.');
  const text = resultsCsv(results, {
    study: params.study,
    labName: actor.labName,
    labIsDemo: actor.labIsDemo
  });
  const name = `${params.study}-experiment-${results.experiment.number}-recoveries.csv`;
  return attachment(name, new TextEncoder().encode(text), 'text/csv; charset=utf-8');
};
