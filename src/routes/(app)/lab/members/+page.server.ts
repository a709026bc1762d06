import { redirect } from '@sveltejs/kit';
import { z } from 'zod';
import { isAllowed } from '$lib/domain/permissions';
import { invitationForm, roleChangeForm } from '$lib/schemas/people';
import { config } from '$lib/server/config';
import { answerForm, checked } from '$lib/server/form-answer';
import { memberIn } from '$lib/server/hooks/member-in';
import { linkOrigin } from '$lib/server/mail/link-origin';
import { usesLocalMailbox } from '$lib/server/mail/transport';
import { invite, listInvitations, revokeInvitation } from '$lib/server/services/invitations';
import { changeRole, listMembers, removeMember } from '$lib/server/services/members';
import type { Actions, PageServerLoad } from './$types';

const memberForm = z.object({ userId: z.uuid('This member is not known here.') });
const openInvitationForm = z.object({ invitationId: z.uuid('This invitation is not known here.') });

export const load: PageServerLoad = async ({ locals, url }) => {
  const actor = memberIn(locals);
  const canManage = isAllowed(actor.role, 'members.manage');
  const members = await listMembers(actor);
  const asked = url.searchParams.get('remove');
  return {
    members,
    canManage,
    ownId: actor.userId,
    invitations: canManage ? await listInvitations(actor) : [],
    /** The member whose removal is to be confirmed; in the address, so that it works without JavaScript. */
    leaving: canManage ? (members.find(({ userId }) => userId === asked) ?? null) : null,
    after: url.searchParams.get('after'),
    hasLocalMailbox: usesLocalMailbox()
  };
};

export const actions: Actions = {
  invite: ({ request, locals, url }) =>
    answerForm(request, async (fields) => {
      const { email, role } = checked(invitationForm, fields);
      await invite(memberIn(locals), { email, role, origin: linkOrigin(config(), url) });
      redirect(303, '/lab/members?after=invited');
    }),

  revoke: ({ request, locals }) =>
    answerForm(request, async (fields) => {
      await revokeInvitation(memberIn(locals), checked(openInvitationForm, fields));
      redirect(303, '/lab/members?after=revoked');
    }),

  role: ({ request, locals }) =>
    answerForm(request, async (fields) => {
      await changeRole(memberIn(locals), checked(roleChangeForm, fields));
      redirect(303, '/lab/members?after=role');
    }),

  remove: ({ request, locals }) =>
    answerForm(request, async (fields) => {
      await removeMember(memberIn(locals), checked(memberForm, fields));
      redirect(303, '/lab/members?after=removed');
    })
};
