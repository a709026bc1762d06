import { memberIn } from '$lib/server/hooks/member-in';
import { getSequence } from '$lib/server/services/sequences';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params }) => ({
  sequence: await getSequence(memberIn(locals), params.study, params.sequence)
});
