import { redirect } from '@sveltejs/kit';
import { isAllowed } from '$lib/domain/permissions';
import { analytePreviewForm, analyteVersionForm } from '$lib/schemas/analyte';
import { formObject } from '$lib/schemas/form-object';
import { Forbidden } from '$lib/server/errors';
import { answerForm, checked } from '$lib/server/form-answer';
import { memberIn } from '$lib/server/hooks/member-in';
import { previewAnalyte } from '$lib/server/services/analyte-chemistry';
import { getAnalyte, listClasses, newAnalyteVersion } from '$lib/server/services/library';
import { analyteFields } from '../../analyte-fields';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params }) => {
  const actor = memberIn(locals);
  if (!isAllowed(actor.role, 'library.edit'))
    throw new Forbidden('A chemist or a lab manager changes the library.');
  const { current } = await getAnalyte(actor, params.analyte);
  return {
    name: current.name,
    version: current.version,
    stored: analyteFields(current),
    classes: await listClasses(actor)
  };
};

export const actions: Actions = {
  look: ({ request, locals, params }) =>
    answerForm(request, async (fields, form) => ({
      values: fields,
      errors: {} as Record<string, string>,
      message: null,
      preview: await previewAnalyte(
        memberIn(locals),
        checked(analytePreviewForm, formObject(form)),
        params.analyte
      )
    })),

  store: ({ request, locals, params }) =>
    answerForm(request, async (_fields, form) => {
      await newAnalyteVersion(
        memberIn(locals),
        params.analyte,
        checked(analyteVersionForm, formObject(form))
      );
      redirect(303, `/library/analytes/${params.analyte}?done=changed`);
    })
};
