import { json } from '@sveltejs/kit';
import { validationParameters } from '$lib/schemas/validation';
import { checked } from '$lib/server/form-answer';
import { memberIn } from '$lib/server/hooks/member-in';
import { apiFigureLink } from '$lib/server/http/api-figure-link';
import { validationView } from '$lib/server/services/validation';
import type { RequestHandler } from './$types';

/** The validation of a study, part by part. */
export const GET: RequestHandler = async ({ locals, params, url }) => {
  const query = checked(validationParameters, Object.fromEntries(url.searchParams));
  return json(await validationView(memberIn(locals), params.study, query, apiFigureLink(params.study)));
};
