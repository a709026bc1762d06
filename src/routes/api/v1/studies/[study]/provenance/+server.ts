import { json } from '@sveltejs/kit';
import { figureParameters } from '$lib/schemas/findings';
import { checked } from '$lib/server/form-answer';
import { memberIn } from '$lib/server/hooks/member-in';
import { provenanceView } from '$lib/server/services/results';
import { apiFigureLink } from '$lib/server/http/api-figure-link';
import type { RequestHandler } from './$types';

/** Where a figure comes from; hrefs lead to the next level. */
export const GET: RequestHandler = async ({ locals, params, url }) => {
  const query = checked(figureParameters, Object.fromEntries(url.searchParams));
  return json(
    await provenanceView(memberIn(locals), params.study, query.figure, apiFigureLink(params.study))
  );
};
