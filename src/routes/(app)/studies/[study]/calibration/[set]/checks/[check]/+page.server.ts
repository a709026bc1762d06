import { redirect } from '@sveltejs/kit';
import { checkStandardChange } from '$lib/schemas/check-standard';
import { formObject } from '$lib/schemas/form-object';
import { Forbidden, NotFound } from '$lib/server/errors';
import { answerForm, checked } from '$lib/server/form-answer';
import { memberIn } from '$lib/server/hooks/member-in';
import {
  changeCheckStandard,
  getCheckStandards,
  removeCheckStandard
} from '$lib/server/services/check-standards';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params, parent }) => {
  const { may } = await parent();
  if (!may.calibrate)
    throw new Forbidden('Checks are described by a chemist or a lab manager, while the study is open.');
  const { set, checks, entries } = await getCheckStandards(memberIn(locals), params.study, params.set);
  const check = checks.find(({ id }) => id === params.check);
  if (!check) throw new NotFound();
  return { set, check, entries };
};

export const actions: Actions = {
  change: ({ request, locals, params }) =>
    answerForm(request, async (_fields, form) => {
      const asked = checked(checkStandardChange, formObject(form));
      await changeCheckStandard(memberIn(locals), params.study, params.set, params.check, asked);
      redirect(303, `/studies/${params.study}/calibration/${params.set}/checks?done=changed`);
    }),
  remove: ({ request, locals, params }) =>
    answerForm(request, async () => {
      await removeCheckStandard(memberIn(locals), params.study, params.set, params.check);
      redirect(303, `/studies/${params.study}/calibration/${params.set}/checks?done=removed`);
    })
};
