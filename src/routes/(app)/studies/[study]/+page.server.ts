import { isAllowed } from '$lib/domain/permissions';
import { subjectQuery } from '$lib/schemas/findings';
import { memberIn } from '$lib/server/hooks/member-in';
import { stageLadderView } from '$lib/server/services/results';
import { openFigure } from '$lib/server/services/figures/open-figure';
import { figureLinks } from '$lib/views/figure-links';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params, url }) => {
  const actor = memberIn(locals);
  const links = figureLinks(url);
  const query = subjectQuery.parse(Object.fromEntries(url.searchParams));
  const { subject, ladder, findings } = await stageLadderView(actor, params.study, query, links.figureLink);
  return {
    subject,
    ladder,
    findings,
    figure: await openFigure(actor, params.study, links),
    mayPlan: isAllowed(actor.role, 'studies.edit')
  };
};
