import { json } from '@sveltejs/kit';
import { memberIn } from '$lib/server/hooks/member-in';
import { listStudies } from '$lib/server/services/studies';
import type { RequestHandler } from './$types';

/** The studies of the lab. */
export const GET: RequestHandler = async ({ locals }) =>
  json({ studies: await listStudies(memberIn(locals)) });
