import { memberIn } from '$lib/server/hooks/member-in';
import { attachment, xlsxType } from '$lib/server/http/attachment';
import { annotatedImport } from '$lib/server/services/annotated-imports';
import type { RequestHandler } from './$types';

/** A copy of the file for mending it at one's desk. */
export const GET: RequestHandler = async ({ locals, params }) => {
  const { fileName, bytes } = await annotatedImport(memberIn(locals), params.study, params.import);
  return attachment(fileName, bytes, xlsxType);
};
