import { redirect } from '@sveltejs/kit';
import { ownNameForm } from '$lib/schemas/people';
import { changeForm } from '$lib/schemas/passwords';
import { startSession } from '$lib/server/auth/authjs';
import { answerForm, checked } from '$lib/server/form-answer';
import { memberIn } from '$lib/server/hooks/member-in';
import { changeOwnName } from '$lib/server/services/members';
import { changeOwnPassword } from '$lib/server/services/passwords';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = ({ locals, url }) => {
  const { email, name } = memberIn(locals);
  return { email, name, isPasswordNew: url.searchParams.get('after') === 'password' };
};

export const actions: Actions = {
  name: ({ request, locals }) =>
    answerForm(request, async (fields) => {
      await changeOwnName(memberIn(locals), checked(ownNameForm, fields));
      redirect(303, '/account');
    }),

  password: (event) =>
    answerForm(event.request, async (fields) => {
      const actor = memberIn(event.locals);
      const { current, password } = checked(changeForm(actor), fields);
      await changeOwnPassword(actor, { current, password, address: event.getClientAddress() });
      // Every session ended with the old password; this browser begins a new one.
      await startSession(event, { email: actor.email, password, labId: actor.labId });
      redirect(303, '/account?after=password');
    })
};
