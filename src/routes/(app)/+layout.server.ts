import { redirect } from '@sveltejs/kit';
import { listOwnLabs } from '$lib/server/services/sessions';
import type { LayoutServerLoad } from './$types';

export const load: LayoutServerLoad = async ({ locals: { actor } }) => {
  // The request hook let nobody else in; this is for the compiler.
  if (!actor) redirect(303, '/sign-in');
  return {
    member: { name: actor.name, role: actor.role },
    lab: { id: actor.labId, name: actor.labName, isDemo: actor.labIsDemo },
    labs: await listOwnLabs(actor)
  };
};
