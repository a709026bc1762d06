import { memberIn } from '$lib/server/hooks/member-in';
import { getCriteriaSet } from '$lib/server/services/criteria-sets';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params, url }) => {
  const set = await getCriteriaSet(memberIn(locals), params.set);
  const asked = Number(url.searchParams.get('version'));
  return {
    set,
    shown: set.versions.find(({ version }) => version === asked) ?? set.current,
    done: url.searchParams.get('done')
  };
};
