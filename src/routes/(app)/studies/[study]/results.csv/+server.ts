import { subjectParameters } from '$lib/schemas/findings';
import { checked } from '$lib/server/form-answer';
import { memberIn } from '$lib/server/hooks/member-in';
import { recoveriesFile } from '$lib/server/http/recoveries-file';
import { resultsTableView } from '$lib/server/services/results';
import type { RequestHandler } from './$types';

/** The method recoveries of one experiment, unrounded. */
export const GET: RequestHandler = async ({ locals, params, url }) => {
  const actor = memberIn(locals);
  const query = checked(subjectParameters, Object.fromEntries(url.searchParams));
  const { results } = await resultsTableView(actor, params.study, query, (address) => address);
  return recoveriesFile(actor, params.study, results);
};
