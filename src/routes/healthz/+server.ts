import { json } from '@sveltejs/kit';
import type { RequestHandler } from './$types';

/** The process runs and answers; nothing is said of what it depends on. */
export const GET: RequestHandler = () => json({ status: 'ok' });
