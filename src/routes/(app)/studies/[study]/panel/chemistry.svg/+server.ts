import { render } from 'svelte/server';
import NeutralFigure from '$lib/charts/NeutralFigure.svelte';
import { dayText } from '$lib/domain/moment-text';
import { readChemistryPage } from '$lib/schemas/panel-chemistry';
import { NotFound } from '$lib/server/errors';
import { memberIn } from '$lib/server/hooks/member-in';
import { attachment } from '$lib/server/http/attachment';
import { svgFile } from '$lib/server/reports/drawing';
import { panelChemistry } from '$lib/server/services/panel-chemistry';
import { getStudy } from '$lib/server/services/studies';
import type { RequestHandler } from './$types';

/** The neutral shares of the panel over pH as they stand on their page, as a drawing that stands by itself. */
export const GET: RequestHandler = async ({ locals, params, url }) => {
  const actor = memberIn(locals);
  const { query } = readChemistryPage(Object.fromEntries(url.searchParams));
  const { code, title, revision, state } = await getStudy(actor, params.study);
  const { groups, ph, planned } = await panelChemistry(actor, code, query, {
    order: query.order,
    href: () => ''
  });
  if (groups.length === 0) throw new NotFound('There is nothing on the panel to draw yet.');
  const { body } = render(NeutralFigure, {
    props: {
      groups,
      ph,
      planned,
      title: `Neutral share over pH, ${code}`,
      source: [
        `${title}. ${code}, revision ${revision}, ${state}`,
        actor.labName,
        ...(actor.labIsDemo ? ['Invented demo data'] : []),
        dayText(new Date().toISOString())
      ].join('. ')
    }
  });
  const bytes = new TextEncoder().encode(svgFile(body));
  return attachment(`${code}-chemistry-at-pH-${ph}.svg`, bytes, 'image/svg+xml');
};
