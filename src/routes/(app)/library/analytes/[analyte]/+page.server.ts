import { memberIn } from '$lib/server/hooks/member-in';
import { analyteChemistry } from '$lib/server/services/analyte-chemistry';
import { getAnalyte } from '$lib/server/services/library';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params, url }) => {
  const actor = memberIn(locals);
  const analyte = await getAnalyte(actor, params.analyte);
  const asked = Number(url.searchParams.get('version'));
  const shown = analyte.versions.find(({ version }) => version === asked) ?? analyte.current;
  return {
    analyte,
    shown,
    chemistry: await analyteChemistry(actor, shown),
    done: url.searchParams.get('done')
  };
};
