import { memberIn } from '$lib/server/hooks/member-in';
import { getCalibrationSets } from '$lib/server/services/calibrations';
import { listSequences } from '$lib/server/services/sequences';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params }) => ({
  sets: await getCalibrationSets(memberIn(locals), params.study),
  sequences: await listSequences(memberIn(locals), params.study)
});
