import { isAllowed } from '$lib/domain/permissions';
import { memberIn } from '$lib/server/hooks/member-in';
import { listStudies } from '$lib/server/services/studies';
import { studyStates } from '$lib/domain/vocabulary';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, url }) => {
  const actor = memberIn(locals);
  const asked = url.searchParams.get('state') ?? '';
  const state = studyStates.find((name) => name === asked) ?? '';
  const studies = await listStudies(actor);
  return {
    studies: state === '' ? studies : studies.filter((study) => study.state === state),
    total: studies.length,
    state,
    mayPlan: isAllowed(actor.role, 'studies.edit')
  };
};
