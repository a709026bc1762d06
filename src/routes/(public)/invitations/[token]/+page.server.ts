import { redirect } from '@sveltejs/kit';
import { acceptForm } from '$lib/schemas/passwords';
import { startSession, useLab } from '$lib/server/auth/authjs';
import { Conflict, Invalid } from '$lib/server/errors';
import { answerForm, checked } from '$lib/server/form-answer';
import { acceptAsNewPerson, acceptWithAccount, readInvitation } from '$lib/server/services/invitations';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ params, locals, setHeaders }) => {
  // The address is a secret: it goes to no other page as a referrer.
  setHeaders({ 'referrer-policy': 'no-referrer' });
  const invitation = await readInvitation(params.token);
  const isSignedIn = invitation.state === 'open' && locals.actor?.email === invitation.email;
  return { invitation, isSignedIn };
};

export const actions: Actions = {
  create: (event) =>
    answerForm(event.request, async (fields) => {
      const invitation = await readInvitation(event.params.token);
      if (invitation.state !== 'open') throw new Conflict('This invitation does not work any more.');
      const { name, password } = checked(acceptForm({ email: invitation.email, name: fields.name }), fields);
      const { email, labId } = await acceptAsNewPerson({ secret: event.params.token, name, password });
      await startSession(event, { email, password, labId });
      redirect(303, '/');
    }),

  join: (event) =>
    answerForm(event.request, async (fields) => {
      const { actor } = event.locals;
      const password = fields.password ?? '';
      const { email, labId } = await acceptWithAccount(actor, {
        secret: event.params.token,
        password,
        address: event.getClientAddress()
      });
      if (actor?.email === email) await useLab(event, labId);
      else if (!(await startSession(event, { email, password, labId }))) {
        throw Invalid.at('password', 'You have joined; signing in failed. Sign in with your password.');
      }
      redirect(303, '/');
    })
};
