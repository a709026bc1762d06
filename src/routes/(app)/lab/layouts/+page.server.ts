import { redirect } from '@sveltejs/kit';
import { isAllowed } from '$lib/domain/permissions';
import { answerForm } from '$lib/server/form-answer';
import { memberIn } from '$lib/server/hooks/member-in';
import { listColumnMaps, setColumnMapRetired } from '$lib/server/services/column-maps';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals }) => {
  const actor = memberIn(locals);
  return { layouts: await listColumnMaps(actor), mayChange: isAllowed(actor.role, 'data.enter') };
};

export const actions: Actions = {
  retire: ({ request, locals }) =>
    answerForm(request, async ({ layout = '' }) => {
      await setColumnMapRetired(memberIn(locals), layout, true);
      redirect(303, '/lab/layouts');
    }),
  revive: ({ request, locals }) =>
    answerForm(request, async ({ layout = '' }) => {
      await setColumnMapRetired(memberIn(locals), layout, false);
      redirect(303, '/lab/layouts');
    })
};
