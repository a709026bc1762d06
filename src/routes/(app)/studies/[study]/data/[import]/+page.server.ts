import { redirect } from '@sveltejs/kit';
import { isAllowed } from '$lib/domain/permissions';
import { declareForm, previewQuery, storeForm, withdrawForm } from '$lib/schemas/imports';
import { answerForm, checked } from '$lib/server/form-answer';
import { memberIn } from '$lib/server/hooks/member-in';
import { previewImport } from '$lib/server/services/import-preview';
import { storeImport } from '$lib/server/services/import-storing';
import { declareAboutImport, dropImport, listImports, withdrawImport } from '$lib/server/services/imports';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params, url }) => {
  const actor = memberIn(locals);
  const window = previewQuery.parse(Object.fromEntries(url.searchParams));
  const preview = await previewImport(actor, params.study, params.import, window);
  const listed = (await listImports(actor, params.study)).find(({ id }) => id === preview.id) ?? null;
  return {
    preview,
    listed,
    again: url.searchParams.has('again'),
    stored: url.searchParams.has('stored'),
    mayEnter: isAllowed(actor.role, 'data.enter')
  };
};

const address = (params: { study: string; import: string }): string =>
  `/studies/${params.study}/data/${params.import}`;

export const actions: Actions = {
  declare: ({ locals, params, request }) =>
    answerForm(request, async (fields) => {
      await declareAboutImport(memberIn(locals), params.study, params.import, checked(declareForm, fields));
      redirect(303, address(params));
    }),

  store: ({ locals, params, request }) =>
    answerForm(request, async (fields) => {
      const { questions, reason } = checked(storeForm, fields);
      await storeImport(memberIn(locals), params.study, params.import, {
        questionsConfirmed: questions,
        reason
      });
      redirect(303, `${address(params)}?stored=1`);
    }),

  drop: ({ locals, params, request }) =>
    answerForm(request, async () => {
      await dropImport(memberIn(locals), params.study, params.import);
      redirect(303, `/studies/${params.study}/data`);
    }),

  withdraw: ({ locals, params, request }) =>
    answerForm(request, async (fields) => {
      await withdrawImport(
        memberIn(locals),
        params.study,
        params.import,
        checked(withdrawForm, fields).reason
      );
      redirect(303, `/studies/${params.study}/data`);
    })
};
