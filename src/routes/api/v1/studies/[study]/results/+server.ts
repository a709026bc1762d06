import { json } from '@sveltejs/kit';
import { resultsParameters } from '$lib/schemas/api/parameters';
import { checked } from '$lib/server/form-answer';
import { memberIn } from '$lib/server/hooks/member-in';
import { resultsTableView } from '$lib/server/services/results';
import { apiFigureLink } from '$lib/server/http/api-figure-link';
import { recoveriesFile } from '$lib/server/http/recoveries-file';
import type { RequestHandler } from './$types';

/** Method recoveries of a variant's extraction, or of the experiment asked for; as JSON, or as a table. */
export const GET: RequestHandler = async ({ locals, params, url }) => {
  const actor = memberIn(locals);
  const { format, ...query } = checked(resultsParameters, Object.fromEntries(url.searchParams));
  const answer = await resultsTableView(actor, params.study, query, apiFigureLink(params.study));
  return format === 'csv' ? recoveriesFile(actor, params.study, answer.results) : json(answer);
};
