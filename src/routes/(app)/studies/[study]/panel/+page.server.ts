import { redirect } from '@sveltejs/kit';
import { formObject } from '$lib/schemas/form-object';
import { panelEntryForm, panelPasteForm } from '$lib/schemas/panel';
import { answerForm, checked } from '$lib/server/form-answer';
import { memberIn } from '$lib/server/hooks/member-in';
import { panelChemistry } from '$lib/server/services/panel-chemistry';
import {
  getPanel,
  pastePanel,
  removePanelEntry,
  setPanelEntry,
  takeCurrentVersion
} from '$lib/server/services/panels';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params, url }) => {
  const actor = memberIn(locals);
  const panel = await getPanel(actor, params.study);
  const edited = url.searchParams.get('edit');
  const removed = url.searchParams.get('remove');
  const { lead, groups, further } = await panelChemistry(
    actor,
    params.study,
    { ph: null, solids: null, phase: 'c18' },
    { order: 'panel', href: () => '' }
  );
  return {
    panel,
    lead,
    groups: [
      ...groups.map(({ key, title, question, rows }) => ({
        key,
        title,
        question,
        names: rows.map(({ name }) => name)
      })),
      ...further
    ],
    editing: panel.find(({ id }) => id === edited) ?? null,
    removing: panel.find(({ id }) => id === removed) ?? null,
    left: Number(url.searchParams.get('left') ?? 0),
    done: url.searchParams.get('done')
  };
};

export const actions: Actions = {
  paste: ({ request, locals, params }) =>
    answerForm(request, async (fields) => ({
      values: {} as Record<string, string>,
      errors: {} as Record<string, string>,
      message: null,
      paste: await pastePanel(memberIn(locals), params.study, checked(panelPasteForm, fields))
    })),

  set: ({ request, locals, params }) =>
    answerForm(request, async (_fields, form) => {
      await setPanelEntry(memberIn(locals), params.study, checked(panelEntryForm, formObject(form)));
      redirect(303, `/studies/${params.study}/panel?done=set`);
    }),

  renew: ({ request, locals, params }) =>
    answerForm(request, async ({ entryId = '' }) => {
      await takeCurrentVersion(memberIn(locals), params.study, entryId);
      redirect(303, `/studies/${params.study}/panel?done=renewed`);
    }),

  remove: ({ request, locals, params }) =>
    answerForm(request, async ({ entryId = '' }) => {
      await removePanelEntry(memberIn(locals), params.study, entryId);
      redirect(303, `/studies/${params.study}/panel?done=removed`);
    })
};
