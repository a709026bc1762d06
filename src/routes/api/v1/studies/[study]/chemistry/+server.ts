import { json } from '@sveltejs/kit';
import { chemistryParameters } from '$lib/schemas/panel-chemistry';
import { checked } from '$lib/server/form-answer';
import { memberIn } from '$lib/server/hooks/member-in';
import { panelChemistry } from '$lib/server/services/panel-chemistry';
import type { RequestHandler } from './$types';

/** The chemistry of the panel: charge over pH and at one pH, log D, groups, format of the sample. */
export const GET: RequestHandler = async ({ locals, params, url }) => {
  const query = checked(chemistryParameters, Object.fromEntries(url.searchParams));
  const page = `/studies/${encodeURIComponent(params.study)}/panel/chemistry`;
  return json(
    await panelChemistry(memberIn(locals), params.study, query, {
      order: 'panel',
      href: (entryId) => `${page}?analyte=${entryId}`
    })
  );
};
