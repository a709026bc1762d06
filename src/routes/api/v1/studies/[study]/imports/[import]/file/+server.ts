import { memberIn } from '$lib/server/hooks/member-in';
import { attachment } from '$lib/server/http/attachment';
import { importFile } from '$lib/server/services/imports';
import type { RequestHandler } from './$types';

/** The file byte for byte as it came. */
export const GET: RequestHandler = async ({ locals, params }) => {
  const { fileName, bytes } = await importFile(memberIn(locals), params.study, params.import);
  return attachment(fileName, bytes, 'application/octet-stream');
};
