import { experimentNumber, templateParameters } from '$lib/schemas/api/parameters';
import { NotFound } from '$lib/server/errors';
import { checked } from '$lib/server/form-answer';
import { memberIn } from '$lib/server/hooks/member-in';
import { attachment, xlsxType } from '$lib/server/http/attachment';
import { experimentTemplate } from '$lib/server/services/data-templates';
import type { RequestHandler } from './$types';

/** The prefilled data template of an experiment. */
export const GET: RequestHandler = async ({ locals, params, url }) => {
  const number = experimentNumber.safeParse(params.experiment);
  if (!number.success) throw new NotFound('There is no such experiment in this study.');
  const { layout } = checked(templateParameters, Object.fromEntries(url.searchParams));
  const { fileName, bytes } = await experimentTemplate(memberIn(locals), params.study, {
    experimentNumber: number.data,
    layout
  });
  return attachment(fileName, bytes, xlsxType);
};
