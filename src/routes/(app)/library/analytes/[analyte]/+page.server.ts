import { memberIn } from '$lib/server/hooks/member-in';
import { getAnalyte } from '$lib/server/services/library';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params, url }) => {
  const analyte = await getAnalyte(memberIn(locals), params.analyte);
  const asked = Number(url.searchParams.get('version'));
  return {
    analyte,
    shown: analyte.versions.find(({ version }) => version === asked) ?? analyte.current,
    done: url.searchParams.get('done')
  };
};
