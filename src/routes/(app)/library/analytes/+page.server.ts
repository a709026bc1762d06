import { memberIn } from '$lib/server/hooks/member-in';
import { listAnalytes, listClasses } from '$lib/server/services/library';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, url }) => {
  const actor = memberIn(locals);
  const text = url.searchParams.get('text') ?? '';
  const group = url.searchParams.get('class') ?? '';
  const page = Number(url.searchParams.get('page') ?? 1) || 1;
  return {
    found: await listAnalytes(actor, { text, class: group, page }),
    classes: await listClasses(actor),
    text,
    group
  };
};
