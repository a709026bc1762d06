import { memberIn } from '$lib/server/hooks/member-in';
import { openFigure } from '$lib/server/services/figures/open-figure';
import { summaryView } from '$lib/server/services/summaries';
import { figureLinks } from '$lib/views/figure-links';
import { summaryParts } from './summary-parts';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params, url }) => {
  const actor = memberIn(locals);
  const links = figureLinks(url);
  // The figures of the validation stay on their own page: here each part is a line.
  const { validation, ...summary } = await summaryView(actor, params.study, links.figureLink);
  return {
    summary,
    validation: summaryParts(validation),
    figure: await openFigure(actor, params.study, links),
    made: { by: actor.name, at: new Date().toISOString() }
  };
};
