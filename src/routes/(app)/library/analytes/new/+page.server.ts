import { redirect } from '@sveltejs/kit';
import { isAllowed } from '$lib/domain/permissions';
import { analyteForm, analytePreviewForm } from '$lib/schemas/analyte';
import { formObject } from '$lib/schemas/form-object';
import { Forbidden } from '$lib/server/errors';
import { answerForm, checked } from '$lib/server/form-answer';
import { memberIn } from '$lib/server/hooks/member-in';
import { previewAnalyte } from '$lib/server/services/analyte-chemistry';
import { createAnalyte, listClasses } from '$lib/server/services/library';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, url }) => {
  const actor = memberIn(locals);
  if (!isAllowed(actor.role, 'library.edit'))
    throw new Forbidden('A chemist or a lab manager adds to the library.');
  return { classes: await listClasses(actor), name: url.searchParams.get('name') ?? '' };
};

export const actions: Actions = {
  look: ({ request, locals }) =>
    answerForm(request, async (fields, form) => ({
      values: fields,
      errors: {} as Record<string, string>,
      message: null,
      preview: await previewAnalyte(memberIn(locals), checked(analytePreviewForm, formObject(form)), null)
    })),

  store: ({ request, locals }) =>
    answerForm(request, async (_fields, form) => {
      const id = await createAnalyte(memberIn(locals), checked(analyteForm, formObject(form)));
      redirect(303, `/library/analytes/${id}?done=added`);
    })
};
