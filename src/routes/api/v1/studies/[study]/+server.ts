import { json } from '@sveltejs/kit';
import { memberIn } from '$lib/server/hooks/member-in';
import { getStudy } from '$lib/server/services/studies';
import type { RequestHandler } from './$types';

/** One study: what it aims at, its criteria, its stages, and how much it holds. */
export const GET: RequestHandler = async ({ locals, params }) =>
  json({ study: await getStudy(memberIn(locals), params.study) });
