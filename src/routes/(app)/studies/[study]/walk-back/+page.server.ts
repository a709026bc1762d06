import { subjectQuery } from '$lib/schemas/findings';
import { memberIn } from '$lib/server/hooks/member-in';
import { walkBackView } from '$lib/server/services/results';
import { openFigure } from '$lib/server/services/figures/open-figure';
import { figureLinks } from '$lib/views/figure-links';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params, url }) => {
  const actor = memberIn(locals);
  const links = figureLinks(url);
  const query = subjectQuery.parse(Object.fromEntries(url.searchParams));
  const view = await walkBackView(actor, params.study, query, links.figureLink);
  return { ...view, figure: await openFigure(actor, params.study, links) };
};
