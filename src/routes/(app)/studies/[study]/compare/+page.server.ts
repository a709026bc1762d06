import { memberIn } from '$lib/server/hooks/member-in';
import { compareView } from '$lib/server/services/results';
import { openFigure } from '$lib/server/services/figures/open-figure';
import { figureLinks } from '$lib/views/figure-links';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params, url }) => {
  const actor = memberIn(locals);
  const links = figureLinks(url);
  return {
    compare: await compareView(actor, params.study, links.figureLink),
    figure: await openFigure(actor, params.study, links)
  };
};
