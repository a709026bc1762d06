import { fail, redirect } from '@sveltejs/kit';
import { chemistryGroups } from '$lib/server/chemistry';
import { isAllowed } from '$lib/domain/permissions';
import { formObject } from '$lib/schemas/form-object';
import { studyForm } from '$lib/schemas/study';
import { Forbidden } from '$lib/server/errors';
import { answerForm, checked } from '$lib/server/form-answer';
import { memberIn } from '$lib/server/hooks/member-in';
import { listCriteriaSets } from '$lib/server/services/criteria-sets';
import { findByNames } from '$lib/server/services/library';
import { createStudy } from '$lib/server/services/studies';
import type { Actor } from '$lib/domain/actor';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals }) => {
  const actor = memberIn(locals);
  if (!isAllowed(actor.role, 'studies.edit'))
    throw new Forbidden('A chemist or a lab manager creates studies.');
  return { criteria: await listCriteriaSets(actor) };
};

/** What a pasted list holds, as the page shows it before it asks for anything else. */
async function lookUp(actor: Actor, text: string) {
  const matches = await findByNames(actor, text.split(/\r?\n/));
  const found = matches.flatMap(({ analyte }) => (analyte ? [analyte] : []));
  const once = [...new Map(found.map((analyte) => [analyte.id, analyte])).values()];
  return {
    found: once.length,
    twice: found.length - once.length,
    groups: chemistryGroups(once),
    notFound: matches.filter(({ analyte }) => analyte === null)
  };
}

export const actions: Actions = {
  look: ({ request, locals }) =>
    answerForm(request, async (fields) => ({
      values: fields,
      errors: {} as Record<string, string>,
      message: null,
      lookup: await lookUp(memberIn(locals), fields.panelText ?? '')
    })),

  create: async ({ request, locals }) => {
    const actor = memberIn(locals);
    const copy = request.clone();
    const answer = await answerForm(request, async (_fields, form) => {
      const { code, panel } = await createStudy(actor, checked(studyForm, formObject(form)));
      const left = panel.notFound.length > 0 ? `?left=${panel.notFound.length}` : '';
      redirect(303, `/studies/${code}/panel${left}`);
    });
    // The list that was looked up stays on the page while the form is mended.
    const text = (await copy.formData()).get('panelText');
    return fail(answer.status, { ...answer.data, lookup: await lookUp(actor, String(text ?? '')) });
  }
};
