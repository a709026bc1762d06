import { redirect } from '@sveltejs/kit';
import { isAllowed } from '$lib/domain/permissions';
import { analyteForm } from '$lib/schemas/analyte';
import { formObject } from '$lib/schemas/form-object';
import { Forbidden } from '$lib/server/errors';
import { answerForm, checked } from '$lib/server/form-answer';
import { memberIn } from '$lib/server/hooks/member-in';
import { createAnalyte, listClasses } from '$lib/server/services/library';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, url }) => {
  const actor = memberIn(locals);
  if (!isAllowed(actor.role, 'library.edit'))
    throw new Forbidden('A chemist or a lab manager adds to the library.');
  return { classes: await listClasses(actor), name: url.searchParams.get('name') ?? '' };
};

export const actions: Actions = {
  default: ({ request, locals }) =>
    answerForm(request, async (_fields, form) => {
      const id = await createAnalyte(memberIn(locals), checked(analyteForm, formObject(form)));
      redirect(303, `/library/analytes/${id}?done=added`);
    })
};
