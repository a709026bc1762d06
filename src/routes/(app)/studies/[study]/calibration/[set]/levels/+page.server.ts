import { redirect } from '@sveltejs/kit';
import { levelsForm, levelsProposal } from '$lib/schemas/calibration';
import { formObject } from '$lib/schemas/form-object';
import { Forbidden } from '$lib/server/errors';
import { answerForm, checked } from '$lib/server/form-answer';
import { memberIn } from '$lib/server/hooks/member-in';
import { changeLevels, proposeLevels } from '$lib/server/services/calibration-level-changes';
import { getCalibrationSet } from '$lib/server/services/calibrations';
import { getPanel } from '$lib/server/services/panels';
import type { Actions, PageServerLoad } from './$types';
import { sentLevels } from './sent-levels';

export const load: PageServerLoad = async ({ locals, params, parent }) => {
  const { may } = await parent();
  if (!may.calibrate)
    throw new Forbidden('Levels are changed by a chemist or a lab manager, while the study is open.');
  const actor = memberIn(locals);
  const { id, name, version, levelList, concentrations } = await getCalibrationSet(
    actor,
    params.study,
    params.set
  );
  const panel = await getPanel(actor, params.study);
  return {
    set: { id, name, version, levelList, concentrations },
    panel: panel.map(({ id: entryId, role, analyte }) => ({ id: entryId, role, name: analyte.name }))
  };
};

export const actions: Actions = {
  preview: ({ request, locals, params }) =>
    answerForm(request, async (fields, form) => {
      const proposal = checked(levelsProposal, sentLevels(formObject(form)));
      return {
        values: fields,
        errors: {} as Record<string, string>,
        message: null,
        proposed: await proposeLevels(memberIn(locals), params.study, params.set, proposal)
      };
    }),
  store: ({ request, locals, params }) =>
    answerForm(request, async (_fields, form) => {
      const change = checked(levelsForm, sentLevels(formObject(form)));
      await changeLevels(memberIn(locals), params.study, params.set, change);
      redirect(303, `/studies/${params.study}/calibration/${params.set}?done=levels#levels`);
    })
};
