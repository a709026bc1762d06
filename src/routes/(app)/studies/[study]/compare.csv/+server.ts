import { memberIn } from '$lib/server/hooks/member-in';
import { attachment } from '$lib/server/http/attachment';
import { compareCsv } from '$lib/server/reports/findings-csv';
import { compareView } from '$lib/server/services/results';
import type { RequestHandler } from './$types';

/** Every analyte in every variant, unrounded. */
export const GET: RequestHandler = async ({ locals, params }) => {
  const actor = memberIn(locals);
  const view = await compareView(actor, params.study, (address) => address);
  const { labName, labIsDemo } = actor;
  const text = compareCsv(view, { study: params.study, labName, labIsDemo });
  return attachment(`${params.study}-compare.csv`, new TextEncoder().encode(text), 'text/csv; charset=utf-8');
};
