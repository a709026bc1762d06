import { Readable } from 'node:stream';
import { memberIn } from '$lib/server/hooks/member-in';
import { xlsxType } from '$lib/server/http/attachment';
import { summaryWorkbook } from '$lib/server/reports/summary-xlsx';
import { exportedSummary } from '$lib/server/services/summaries';
import type { RequestHandler } from './$types';

/** The validation summary as a workbook, streamed. */
export const GET: RequestHandler = async ({ locals, params, url }) => {
  const actor = memberIn(locals);
  const view = await exportedSummary(actor, params.study, url.origin);
  const book = summaryWorkbook(view, url.origin, { by: actor.name, at: new Date() });
  return new Response(Readable.toWeb(book) as ReadableStream, {
    headers: {
      'content-type': xlsxType,
      // A study's code is made of letters, digits and hyphens.
      'content-disposition': `attachment; filename="${view.study.code}-summary-${view.hash}.xlsx"`,
      'cache-control': 'private, no-store'
    }
  });
};
