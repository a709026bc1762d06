import type { LayoutServerLoad } from './$types';

/** These pages are for everybody; who is signed in sees their lab at the top all the same. */
export const load: LayoutServerLoad = ({ locals: { actor } }) => ({
  member: actor && { name: actor.name, role: actor.role },
  lab: actor && { name: actor.labName, isDemo: actor.labIsDemo }
});
