import { redirect } from '@sveltejs/kit';
import { isAllowed } from '$lib/domain/permissions';
import { criteriaVersionForm } from '$lib/schemas/criteria-set';
import { Forbidden } from '$lib/server/errors';
import { answerForm, checked } from '$lib/server/form-answer';
import { memberIn } from '$lib/server/hooks/member-in';
import { getCriteriaSet, newCriteriaVersion } from '$lib/server/services/criteria-sets';
import { criteriaBody, criteriaFields } from '../../criteria-body';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params }) => {
  const actor = memberIn(locals);
  if (!isAllowed(actor.role, 'library.edit'))
    throw new Forbidden('A chemist or a lab manager changes criteria.');
  const { current } = await getCriteriaSet(actor, params.set);
  return { name: current.name, version: current.version, stored: criteriaFields(current) };
};

export const actions: Actions = {
  default: ({ request, locals, params }) =>
    answerForm(request, async (_fields, form) => {
      await newCriteriaVersion(
        memberIn(locals),
        params.set,
        checked(criteriaVersionForm, criteriaBody(form))
      );
      redirect(303, `/library/criteria/${params.set}?done=changed`);
    })
};
