import { json } from '@sveltejs/kit';
import { memberIn } from '$lib/server/hooks/member-in';
import { apiFigureLink } from '$lib/server/http/api-figure-link';
import { compareView } from '$lib/server/services/results';
import type { RequestHandler } from './$types';

/** Every variant beside the others. */
export const GET: RequestHandler = async ({ locals, params }) =>
  json(await compareView(memberIn(locals), params.study, apiFigureLink(params.study)));
