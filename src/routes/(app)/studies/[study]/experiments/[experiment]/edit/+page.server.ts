import { redirect } from '@sveltejs/kit';
import { experimentChangeForm } from '$lib/schemas/experiment';
import { Forbidden } from '$lib/server/errors';
import { answerForm, checked } from '$lib/server/form-answer';
import { memberIn } from '$lib/server/hooks/member-in';
import { getExperiment, updateExperiment } from '$lib/server/services/experiments';
import { experimentBody } from '../../experiment-body';
import { experimentChoices } from '../../experiment-choices';
import { fieldsOf } from '../../experiment-fields';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params, parent }) => {
  const actor = memberIn(locals);
  const { may } = await parent();
  if (!may.plan)
    throw new Forbidden('Experiments are changed by a chemist or a lab manager, while the study is open.');
  const { number, title, version, hasData, stage, ...rest } = await getExperiment(
    actor,
    params.study,
    Number(params.experiment)
  );
  const choices = await experimentChoices(actor, params.study);
  return {
    experiment: { number, title, version, hasData, stage },
    choices,
    stored: fieldsOf({ number, title, version, hasData, stage, ...rest }, choices.panel)
  };
};

export const actions: Actions = {
  default: ({ request, locals, params }) =>
    answerForm(request, async (_fields, form) => {
      const body = checked(experimentChangeForm, experimentBody(form));
      await updateExperiment(memberIn(locals), params.study, Number(params.experiment), body);
      redirect(303, `/studies/${params.study}/experiments/${params.experiment}?done=changed`);
    })
};
