import { json } from '@sveltejs/kit';
import { importParameters } from '$lib/schemas/api/import-parameters';
import { config } from '$lib/server/config';
import { checked } from '$lib/server/form-answer';
import { memberIn } from '$lib/server/hooks/member-in';
import { sentFile } from '$lib/server/http/sent-file';
import { bringFile, factsOf } from '$lib/server/services/import-bringing';
import { listImports } from '$lib/server/services/imports';
import type { RequestHandler } from './$types';

const statuses = { stored: 201, received: 202, known: 200 } as const;

/** Every file that the study ever received, the newest first. */
export const GET: RequestHandler = async ({ locals, params }) =>
  json({ imports: (await listImports(memberIn(locals), params.study)).map(factsOf) });

/** Brings a data file in: stored (201), received with questions (202), or known already (200). */
export const POST: RequestHandler = async ({ locals, params, request, url }) => {
  const actor = memberIn(locals);
  const { parameters, ...file } = await sentFile({ request, url }, config().uploadLimitBytes);
  const brought = await bringFile(actor, params.study, file, checked(importParameters, parameters));
  const address = `/api/v1/studies/${encodeURIComponent(params.study)}/imports/${brought.import.id}`;
  return json(brought, { status: statuses[brought.outcome], headers: { location: address } });
};
