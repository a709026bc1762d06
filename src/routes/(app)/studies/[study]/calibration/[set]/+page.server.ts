import { redirect } from '@sveltejs/kit';
import { fitForm } from '$lib/schemas/calibration';
import { formObject } from '$lib/schemas/form-object';
import { answerForm, checked } from '$lib/server/form-answer';
import { memberIn } from '$lib/server/hooks/member-in';
import { chooseFit, getCalibrationSet } from '$lib/server/services/calibrations';
import { getPanel } from '$lib/server/services/panels';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params, url }) => {
  const actor = memberIn(locals);
  const set = await getCalibrationSet(actor, params.study, params.set);
  const panel = await getPanel(actor, params.study);
  const asked = url.searchParams.get('analyte');
  return {
    set,
    names: Object.fromEntries(panel.map(({ id, analyte }) => [id, analyte.name])),
    fit: set.fits.find(({ entryId }) => entryId === asked) ?? null,
    done: url.searchParams.get('done')
  };
};

export const actions: Actions = {
  choose: ({ request, locals, params }) =>
    answerForm(request, async (fields, form) => {
      await chooseFit(memberIn(locals), params.study, params.set, checked(fitForm, formObject(form)));
      redirect(
        303,
        `/studies/${params.study}/calibration/${params.set}?analyte=${fields.panelEntryId ?? ''}&done=chosen`
      );
    })
};
