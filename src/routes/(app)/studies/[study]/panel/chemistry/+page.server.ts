import { readChemistryPage } from '$lib/schemas/panel-chemistry';
import { NotFound } from '$lib/server/errors';
import { memberIn } from '$lib/server/hooks/member-in';
import { openSubstance, panelChemistry } from '$lib/server/services/panel-chemistry';
import type { PageServerLoad } from './$types';

/** The address with one parameter set, or without it. */
function addressWith(url: URL, name: string, value: string | null): string {
  const parameters = new URLSearchParams(url.searchParams);
  if (value === null) parameters.delete(name);
  else parameters.set(name, value);
  const query = parameters.toString();
  return query === '' ? url.pathname : `?${query}`;
}

export const load: PageServerLoad = async ({ locals, params, url }) => {
  const actor = memberIn(locals);
  const typed = Object.fromEntries(url.searchParams);
  const { query, errors } = readChemistryPage(typed);
  const chemistry = await panelChemistry(actor, params.study, query, {
    order: query.order,
    href: (entryId) => addressWith(url, 'analyte', entryId)
  });
  const open = query.analyte
    ? await openSubstance(actor, params.study, query.analyte, query).catch((error: unknown) => {
        if (error instanceof NotFound) return 'none' as const;
        throw error;
      })
    : null;
  return {
    chemistry,
    open,
    closeHref: addressWith(url, 'analyte', null),
    order: query.order,
    table: query.table,
    typed,
    errors
  };
};
