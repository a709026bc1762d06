import { redirect } from '@sveltejs/kit';
import { variantForm } from '$lib/schemas/variant';
import { answerForm, checked } from '$lib/server/form-answer';
import { memberIn } from '$lib/server/hooks/member-in';
import { createVariant } from '$lib/server/services/variants';
import { Forbidden } from '$lib/server/errors';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ parent }) => {
  const { may } = await parent();
  if (!may.plan)
    throw new Forbidden('Variants are described by a chemist or a lab manager, while the study is open.');
};

export const actions: Actions = {
  default: ({ request, locals, params }) =>
    answerForm(request, async (fields) => {
      const code = await createVariant(memberIn(locals), params.study, checked(variantForm, fields));
      redirect(303, `/studies/${params.study}/variants/${code}`);
    })
};
