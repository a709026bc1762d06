import { memberIn } from '$lib/server/hooks/member-in';
import { NotFound } from '$lib/server/errors';
import { attachment, xlsxType } from '$lib/server/http/attachment';
import { experimentTemplate } from '$lib/server/services/data-templates';
import type { RequestHandler } from './$types';

/** The prefilled data template of an experiment; `?layout=wide` for analytes across. */
export const GET: RequestHandler = async ({ locals, params, url }) => {
  if (!/^\d{1,6}$/.test(params.experiment)) throw new NotFound('There is no such experiment in this study.');
  const { fileName, bytes } = await experimentTemplate(memberIn(locals), params.study, {
    experimentNumber: Number(params.experiment),
    layout: url.searchParams.get('layout') === 'wide' ? 'wide' : 'long'
  });
  return attachment(fileName, bytes, xlsxType);
};
