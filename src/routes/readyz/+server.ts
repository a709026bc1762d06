import { json } from '@sveltejs/kit';
import { isReady } from '$lib/server/readiness';
import type { RequestHandler } from './$types';

/** Whether requests can be served: a balancer asks this before it sends any. */
export const GET: RequestHandler = async () =>
  (await isReady()) ? json({ status: 'ready' }) : json({ status: 'not ready' }, { status: 503 });
