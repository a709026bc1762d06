import { redirect } from '@sveltejs/kit';
import { checkStandardForm } from '$lib/schemas/check-standard';
import { formObject } from '$lib/schemas/form-object';
import { answerForm, checked } from '$lib/server/form-answer';
import { memberIn } from '$lib/server/hooks/member-in';
import { createCheckStandard, getCheckStandards } from '$lib/server/services/check-standards';
import { listSequences } from '$lib/server/services/sequences';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params, url }) => ({
  ...(await getCheckStandards(memberIn(locals), params.study, params.set)),
  sequences: (await listSequences(memberIn(locals), params.study)).filter(({ sets }) =>
    sets.some(({ id }) => id === params.set)
  ),
  done: url.searchParams.get('done')
});

export const actions: Actions = {
  add: ({ request, locals, params }) =>
    answerForm(request, async (_fields, form) => {
      const asked = checked(checkStandardForm, formObject(form));
      await createCheckStandard(memberIn(locals), params.study, params.set, asked);
      redirect(303, `/studies/${params.study}/calibration/${params.set}/checks?done=described`);
    })
};
