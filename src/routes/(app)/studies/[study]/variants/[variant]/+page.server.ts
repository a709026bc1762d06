import { redirect } from '@sveltejs/kit';
import { seenVersion } from '$lib/schemas/fields';
import { formObject } from '$lib/schemas/form-object';
import { filledRows } from '$lib/schemas/form-rows';
import { evidenceForm, stepsForm, variantChangeForm } from '$lib/schemas/variant';
import { answerForm, checked } from '$lib/server/form-answer';
import { memberIn } from '$lib/server/hooks/member-in';
import { getExperiments } from '$lib/server/services/experiments';
import {
  chooseStageEvidence,
  getVariant,
  removeVariant,
  setProcedureSteps,
  updateVariant
} from '$lib/server/services/variants';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params, url }) => {
  const actor = memberIn(locals);
  const experiments = await getExperiments(actor, params.study);
  return {
    variant: await getVariant(actor, params.study, params.variant),
    experiments: experiments.map(({ number, title, stageKey, measured }) => ({
      number,
      title,
      stageKey,
      measured
    })),
    edits: url.searchParams.get('edit'),
    done: url.searchParams.get('done')
  };
};

export const actions: Actions = {
  name: ({ request, locals, params: { study, variant } }) =>
    answerForm(request, async (fields) => {
      await updateVariant(memberIn(locals), study, variant, checked(variantChangeForm, fields));
      redirect(303, `/studies/${study}/variants/${variant}?done=name`);
    }),

  steps: ({ request, locals, params: { study, variant } }) =>
    answerForm(request, async (_fields, form) => {
      const sent = formObject(form);
      const steps = filledRows(
        sent.steps,
        'instruction',
        'solvent',
        'ph',
        'volumeMl',
        'minutes',
        'temperatureC'
      );
      await setProcedureSteps(memberIn(locals), study, variant, checked(stepsForm, { ...sent, steps }));
      redirect(303, `/studies/${study}/variants/${variant}?done=steps`);
    }),

  evidence: ({ request, locals, params: { study, variant } }) =>
    answerForm(request, async (fields) => {
      await chooseStageEvidence(memberIn(locals), study, variant, checked(evidenceForm, fields));
      redirect(303, `/studies/${study}/variants/${variant}?done=evidence#evidence`);
    }),

  remove: ({ request, locals, params: { study, variant } }) =>
    answerForm(request, async ({ version }) => {
      await removeVariant(memberIn(locals), study, variant, checked(seenVersion, version));
      redirect(303, `/studies/${study}/variants?removed`);
    })
};
