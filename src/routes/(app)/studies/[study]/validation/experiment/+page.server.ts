import { subjectQuery } from '$lib/schemas/findings';
import { memberIn } from '$lib/server/hooks/member-in';
import { listExperimentsOf, resultsTableView, surrogatesView } from '$lib/server/services/results';
import { openFigure } from '$lib/server/services/figures/open-figure';
import { figureLinks } from '$lib/views/figure-links';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params, url }) => {
  const actor = memberIn(locals);
  const links = figureLinks(url);
  const query = subjectQuery.parse(Object.fromEntries(url.searchParams));
  const { subject, results } = await resultsTableView(actor, params.study, query, links.figureLink);
  return {
    experiments: await listExperimentsOf(actor, params.study),
    results,
    portions: subject.experiment
      ? await surrogatesView(actor, params.study, subject.experiment.number, links.figureLink)
      : null,
    figure: await openFigure(actor, params.study, links)
  };
};
