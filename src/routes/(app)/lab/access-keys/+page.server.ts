import { redirect } from '@sveltejs/kit';
import { isAllowed } from '$lib/domain/permissions';
import { accessKeyForm, revokeKeyForm } from '$lib/schemas/access-keys';
import { answerForm, checked } from '$lib/server/form-answer';
import { memberIn } from '$lib/server/hooks/member-in';
import { listAccessKeys, makeAccessKey, revokeAccessKey } from '$lib/server/services/access-keys';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, url, setHeaders }) => {
  const actor = memberIn(locals);
  // A new key stands on this page once; no cache may keep it.
  setHeaders({ 'cache-control': 'no-store' });
  const keys = await listAccessKeys(actor);
  const asked = url.searchParams.get('revoke');
  return {
    keys,
    seesAll: isAllowed(actor.role, 'access-keys.revoke-any'),
    mayImport: isAllowed(actor.role, 'data.enter'),
    /** The key whose end is to be confirmed; in the address, so that it works without JavaScript. */
    ending: keys.find(({ id, state }) => id === asked && state !== 'revoked') ?? null,
    revoked: url.searchParams.has('revoked')
  };
};

export const actions: Actions = {
  make: ({ request, locals }) =>
    answerForm(request, async (fields) => {
      const input = checked(accessKeyForm, fields);
      // Answered, not redirected to: the key is shown this once.
      return { made: { name: input.name, ...(await makeAccessKey(memberIn(locals), input)) } };
    }),

  revoke: ({ request, locals }) =>
    answerForm(request, async (fields) => {
      await revokeAccessKey(memberIn(locals), checked(revokeKeyForm, fields).key);
      redirect(303, '/lab/access-keys?revoked=1');
    })
};
