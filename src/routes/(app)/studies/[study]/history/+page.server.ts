import { historyFilter } from '$lib/schemas/history';
import { memberIn } from '$lib/server/hooks/member-in';
import { listHistory } from '$lib/server/services/audit';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params, url }) => {
  const filter = historyFilter.parse(Object.fromEntries(url.searchParams));
  return { history: await listHistory(memberIn(locals), { study: params.study, filter }) };
};
