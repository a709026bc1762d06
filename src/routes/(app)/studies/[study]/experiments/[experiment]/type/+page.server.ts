import { redirect } from '@sveltejs/kit';
import { formObject } from '$lib/schemas/form-object';
import { keepForm, typingPlanForm } from '$lib/schemas/typing';
import { answerForm, checked } from '$lib/server/form-answer';
import { memberIn } from '$lib/server/hooks/member-in';
import { discardTyped, handOnTyped, keepTyped, planTyping, typingGrid } from '$lib/server/services/typing';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params, url }) => ({
  grid: await typingGrid(memberIn(locals), params.study, Number(params.experiment)),
  person: memberIn(locals).userId,
  fromColumn: Math.max(0, Number(url.searchParams.get('from')) || 0)
});

const here = (params: { readonly study: string; readonly experiment: string }): string =>
  `/studies/${params.study}/experiments/${params.experiment}/type`;

export const actions: Actions = {
  keep: ({ request, locals, params }) =>
    answerForm(request, async (_fields, form) => ({
      values: {} as Record<string, string>,
      errors: {} as Record<string, string>,
      message: null,
      check: null,
      keptAt: await keepTyped(
        memberIn(locals),
        params.study,
        Number(params.experiment),
        checked(keepForm, formObject(form)).cells
      )
    })),

  plan: ({ request, locals, params }) =>
    answerForm(request, async (fields) => {
      await planTyping(
        memberIn(locals),
        params.study,
        Number(params.experiment),
        checked(typingPlanForm, fields)
      );
      redirect(303, here(params));
    }),

  discard: ({ request, locals, params }) =>
    answerForm(request, async () => {
      await discardTyped(memberIn(locals), params.study, Number(params.experiment));
      redirect(303, `${here(params)}?emptied=1`);
    }),

  check: ({ request, locals, params }) =>
    answerForm(request, async (_fields, form) => {
      const actor = memberIn(locals);
      const number = Number(params.experiment);
      const keptAt = await keepTyped(actor, params.study, number, checked(keepForm, formObject(form)).cells);
      const handed = await handOnTyped(actor, params.study, number);
      if (handed.kind === 'mend') {
        return {
          values: {} as Record<string, string>,
          errors: {} as Record<string, string>,
          message: null,
          check: handed.check,
          keptAt
        };
      }
      redirect(
        303,
        `/studies/${params.study}/data/${handed.importId}${handed.storedBefore ? '?again=1' : ''}`
      );
    })
};
