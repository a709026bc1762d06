import { memberIn } from '$lib/server/hooks/member-in';
import { listCriteriaSets } from '$lib/server/services/criteria-sets';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals }) => ({
  sets: await listCriteriaSets(memberIn(locals))
});
