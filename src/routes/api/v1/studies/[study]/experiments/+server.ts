import { json } from '@sveltejs/kit';
import { memberIn } from '$lib/server/hooks/member-in';
import { getExperiments } from '$lib/server/services/experiments';
import type { RequestHandler } from './$types';

/** The experiments of a study by their numbers. */
export const GET: RequestHandler = async ({ locals, params }) =>
  json({ experiments: await getExperiments(memberIn(locals), params.study) });
