import { redirect } from '@sveltejs/kit';
import { resetForm } from '$lib/schemas/passwords';
import { endSession } from '$lib/server/auth/authjs';
import { Conflict } from '$lib/server/errors';
import { answerForm, checked } from '$lib/server/form-answer';
import { readPasswordReset, resetPassword } from '$lib/server/services/passwords';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ params, setHeaders }) => {
  // The address is a secret: it goes to no other page as a referrer.
  setHeaders({ 'referrer-policy': 'no-referrer' });
  return { reset: await readPasswordReset(params.token) };
};

export const actions: Actions = {
  default: (event) =>
    answerForm(event.request, async (fields) => {
      const reset = await readPasswordReset(event.params.token);
      if (reset.state !== 'open') throw new Conflict('This link does not work any more.');
      const { password } = checked(resetForm(reset), fields);
      await resetPassword({ secret: event.params.token, password });
      await endSession(event);
      redirect(303, '/sign-in?after=reset');
    })
};
