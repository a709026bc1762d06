import { redirect } from '@sveltejs/kit';
import { formObject } from '$lib/schemas/form-object';
import { studyChangeForm } from '$lib/schemas/study';
import { answerForm, checked } from '$lib/server/form-answer';
import { memberIn } from '$lib/server/hooks/member-in';
import { listCriteriaSets } from '$lib/server/services/criteria-sets';
import { getStudy, updateStudy } from '$lib/server/services/studies';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params, url }) => {
  const actor = memberIn(locals);
  const sets = await listCriteriaSets(actor);
  return {
    aim: await getStudy(actor, params.study),
    sets: sets.map(({ id, name, version }) => ({ id, name, version })),
    isChanged: url.searchParams.has('done')
  };
};

export const actions: Actions = {
  default: ({ request, locals, params }) =>
    answerForm(request, async (_fields, form) => {
      await updateStudy(memberIn(locals), params.study, checked(studyChangeForm, formObject(form)));
      redirect(303, `/studies/${params.study}/aim?done`);
    })
};
