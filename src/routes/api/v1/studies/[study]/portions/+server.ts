import { json } from '@sveltejs/kit';
import { experimentParameters } from '$lib/schemas/findings';
import { checked } from '$lib/server/form-answer';
import { memberIn } from '$lib/server/hooks/member-in';
import { surrogatesView } from '$lib/server/services/results';
import { apiFigureLink } from '$lib/server/http/api-figure-link';
import type { RequestHandler } from './$types';

/** Surrogates, blanks and matrix effects of one experiment. */
export const GET: RequestHandler = async ({ locals, params, url }) => {
  const query = checked(experimentParameters, Object.fromEntries(url.searchParams));
  return json(
    await surrogatesView(memberIn(locals), params.study, query.experiment, apiFigureLink(params.study))
  );
};
