import { memberIn } from '$lib/server/hooks/member-in';
import { getExperiments } from '$lib/server/services/experiments';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params, url }) => {
  const experiments = await getExperiments(memberIn(locals), params.study);
  const stage = url.searchParams.get('stage') ?? '';
  return {
    experiments: experiments.filter(({ stageKey }) => stage === '' || stageKey === stage),
    total: experiments.length,
    stage
  };
};
