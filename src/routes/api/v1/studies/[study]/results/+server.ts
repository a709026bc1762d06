import { json } from '@sveltejs/kit';
import { subjectParameters } from '$lib/schemas/findings';
import { checked } from '$lib/server/form-answer';
import { memberIn } from '$lib/server/hooks/member-in';
import { resultsTableView } from '$lib/server/services/results';
import { apiFigureLink } from '$lib/server/http/api-figure-link';
import type { RequestHandler } from './$types';

/** Method recoveries of a variant's extraction, or of the experiment asked for. */
export const GET: RequestHandler = async ({ locals, params, url }) => {
  const query = checked(subjectParameters, Object.fromEntries(url.searchParams));
  return json(await resultsTableView(memberIn(locals), params.study, query, apiFigureLink(params.study)));
};
