import { chemistryParameters } from '$lib/schemas/panel-chemistry';
import { checked } from '$lib/server/form-answer';
import { memberIn } from '$lib/server/hooks/member-in';
import { attachment } from '$lib/server/http/attachment';
import { chemistryCsv } from '$lib/server/reports/chemistry-csv';
import { panelChemistry } from '$lib/server/services/panel-chemistry';
import type { RequestHandler } from './$types';

/** The chemistry of the panel as a table, unrounded. */
export const GET: RequestHandler = async ({ locals, params, url }) => {
  const actor = memberIn(locals);
  const query = checked(chemistryParameters, Object.fromEntries(url.searchParams));
  const view = await panelChemistry(actor, params.study, query, { order: 'panel', href: () => '' });
  const { labName, labIsDemo } = actor;
  const text = chemistryCsv(view, { study: view.study.code, labName, labIsDemo });
  return attachment(
    `${view.study.code}-chemistry-at-pH-${view.ph}.csv`,
    new TextEncoder().encode(text),
    'text/csv; charset=utf-8'
  );
};
