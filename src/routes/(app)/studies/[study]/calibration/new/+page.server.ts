import { redirect } from '@sveltejs/kit';
import { calibrationSetForm } from '$lib/schemas/calibration';
import { formObject } from '$lib/schemas/form-object';
import { Forbidden } from '$lib/server/errors';
import { answerForm, checked } from '$lib/server/form-answer';
import { memberIn } from '$lib/server/hooks/member-in';
import { createCalibrationSet } from '$lib/server/services/calibrations';
import { getPanel } from '$lib/server/services/panels';
import type { Actions, PageServerLoad } from './$types';
import { filledLevels } from './filled-levels';

export const load: PageServerLoad = async ({ locals, params, parent }) => {
  const { may } = await parent();
  if (!may.calibrate)
    throw new Forbidden('Calibrations are described by a chemist or a lab manager, while the study is open.');
  const panel = await getPanel(memberIn(locals), params.study);
  return { panel: panel.map(({ id, role, analyte }) => ({ id, role, name: analyte.name })) };
};

export const actions: Actions = {
  default: ({ request, locals, params }) =>
    answerForm(request, async (_fields, form) => {
      const sent = formObject(form);
      const levels = filledLevels(sent.levels);
      const id = await createCalibrationSet(
        memberIn(locals),
        params.study,
        checked(calibrationSetForm, { ...sent, levels })
      );
      redirect(303, `/studies/${params.study}/calibration/${id}?done=described`);
    })
};
