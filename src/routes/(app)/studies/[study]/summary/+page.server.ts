import { memberIn } from '$lib/server/hooks/member-in';
import { openFigure } from '$lib/server/services/figures/open-figure';
import { summaryView } from '$lib/server/services/summaries';
import { figureLinks } from '$lib/views/figure-links';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params, url }) => {
  const actor = memberIn(locals);
  const links = figureLinks(url);
  return {
    summary: await summaryView(actor, params.study, links.figureLink),
    figure: await openFigure(actor, params.study, links),
    made: { by: actor.name, at: new Date().toISOString() }
  };
};
