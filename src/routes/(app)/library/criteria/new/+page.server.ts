import { redirect } from '@sveltejs/kit';
import { isAllowed } from '$lib/domain/permissions';
import { criteriaSetForm } from '$lib/schemas/criteria-set';
import { Forbidden } from '$lib/server/errors';
import { answerForm, checked } from '$lib/server/form-answer';
import { memberIn } from '$lib/server/hooks/member-in';
import { createCriteriaSet } from '$lib/server/services/criteria-sets';
import { criteriaBody } from '../criteria-body';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = ({ locals }) => {
  if (!isAllowed(memberIn(locals).role, 'library.edit')) {
    throw new Forbidden('A chemist or a lab manager adds criteria.');
  }
};

export const actions: Actions = {
  default: ({ request, locals }) =>
    answerForm(request, async (_fields, form) => {
      const id = await createCriteriaSet(memberIn(locals), checked(criteriaSetForm, criteriaBody(form)));
      redirect(303, `/library/criteria/${id}?done=added`);
    })
};
