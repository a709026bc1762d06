import { redirect } from '@sveltejs/kit';
import { signInForm } from '$lib/schemas/passwords';
import { startSession } from '$lib/server/auth/authjs';
import { nextPath } from '$lib/server/auth/next-path';
import { Invalid } from '$lib/server/errors';
import { answerForm, checked } from '$lib/server/form-answer';
import { usesLocalMailbox } from '$lib/server/mail/transport';
import { hasDemoLab } from '$lib/server/services/sessions';
import { demoAccounts } from '../../../../seeders/demo-accounts';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, url }) => {
  const next = nextPath(url.searchParams.get('next'));
  if (locals.actor) redirect(303, next);
  return {
    next,
    isAfterReset: url.searchParams.get('after') === 'reset',
    hasLocalMailbox: usesLocalMailbox(),
    demoAccounts: (await hasDemoLab()) ? demoAccounts : []
  };
};

export const actions: Actions = {
  default: (event) =>
    answerForm(event.request, async (fields) => {
      const credentials = checked(signInForm, fields);
      if (!(await startSession(event, credentials))) {
        throw Invalid.at('password', 'This address and this password do not belong together.');
      }
      redirect(303, nextPath(fields.next));
    })
};
