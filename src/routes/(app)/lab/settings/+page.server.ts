import { redirect } from '@sveltejs/kit';
import { labNameForm } from '$lib/schemas/people';
import { answerForm, checked } from '$lib/server/form-answer';
import { memberIn } from '$lib/server/hooks/member-in';
import { renameLab } from '$lib/server/services/labs';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = ({ url }) => ({ isChanged: url.searchParams.get('after') === 'name' });

export const actions: Actions = {
  default: ({ request, locals }) =>
    answerForm(request, async (fields) => {
      await renameLab(memberIn(locals), checked(labNameForm, fields));
      redirect(303, '/lab/settings?after=name');
    })
};
