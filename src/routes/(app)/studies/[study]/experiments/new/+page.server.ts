import { redirect } from '@sveltejs/kit';
import { experimentForm } from '$lib/schemas/experiment';
import { Forbidden } from '$lib/server/errors';
import { answerForm, checked } from '$lib/server/form-answer';
import { memberIn } from '$lib/server/hooks/member-in';
import { createExperiment } from '$lib/server/services/experiments';
import { getStudy } from '$lib/server/services/studies';
import { experimentBody } from '../experiment-body';
import { experimentChoices } from '../experiment-choices';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params, url, parent }) => {
  const actor = memberIn(locals);
  const { may } = await parent();
  if (!may.plan)
    throw new Forbidden('Experiments are planned by a chemist or a lab manager, while the study is open.');
  const { matrix, sampleVolumeMl } = await getStudy(actor, params.study);
  const stageKey = url.searchParams.get('stage') ?? 'instrument';
  const inSample = stageKey === 'extraction';
  return {
    choices: await experimentChoices(actor, params.study),
    first: {
      stageKey,
      variantCode: url.searchParams.get('variant') ?? '',
      // Work further down is in solvent as a rule, to which the study's matrix does not belong.
      matrix: inSample ? matrix : '',
      sampleVolumeMl: String(sampleVolumeMl ?? ''),
      medium: inSample ? 'sample matrix' : 'solvent',
      subtract: 'none',
      'fractions.0.name': 'Elution',
      'fractions.0.kind': 'elution',
      'fractions.0.countsAs': 'method'
    } as Record<string, string>
  };
};

export const actions: Actions = {
  default: ({ request, locals, params }) =>
    answerForm(request, async (_fields, form) => {
      const number = await createExperiment(
        memberIn(locals),
        params.study,
        checked(experimentForm, experimentBody(form))
      );
      redirect(303, `/studies/${params.study}/experiments/${number}?done=planned`);
    })
};
