import { memberIn } from '$lib/server/hooks/member-in';
import { getCalibrationSets } from '$lib/server/services/calibrations';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params }) => ({
  sets: await getCalibrationSets(memberIn(locals), params.study)
});
