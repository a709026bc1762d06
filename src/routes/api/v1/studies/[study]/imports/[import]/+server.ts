import { json } from '@sveltejs/kit';
import { memberIn } from '$lib/server/hooks/member-in';
import { importDetail } from '$lib/server/services/import-bringing';
import type { RequestHandler } from './$types';

/** One import; while it waits, with everything that stands between it and its being stored. */
export const GET: RequestHandler = async ({ locals, params }) =>
  json(await importDetail(memberIn(locals), params.study, params.import));
