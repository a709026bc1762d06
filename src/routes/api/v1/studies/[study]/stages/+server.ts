import { json } from '@sveltejs/kit';
import { subjectParameters } from '$lib/schemas/findings';
import { checked } from '$lib/server/form-answer';
import { memberIn } from '$lib/server/hooks/member-in';
import { stageLadderView } from '$lib/server/services/results';
import { apiFigureLink } from '$lib/server/http/api-figure-link';
import type { RequestHandler } from './$types';

/** The stage ladder and its findings. */
export const GET: RequestHandler = async ({ locals, params, url }) => {
  const query = checked(subjectParameters, Object.fromEntries(url.searchParams));
  return json(await stageLadderView(memberIn(locals), params.study, query, apiFigureLink(params.study)));
};
