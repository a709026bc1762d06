import { json } from '@sveltejs/kit';
import { apiDocument } from '$lib/schemas/api/document';
import type { RequestHandler } from './$types';

/** What the API takes and answers, for programs that make clients of it. */
export const GET: RequestHandler = () =>
  json(apiDocument(), { headers: { 'cache-control': 'public, max-age=300' } });
