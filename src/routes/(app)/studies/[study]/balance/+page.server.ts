import { orderMassBalance } from '$lib/charts/mass-balance-order';
import { massBalanceQuery } from '$lib/schemas/findings';
import { memberIn } from '$lib/server/hooks/member-in';
import { massBalanceView } from '$lib/server/services/results';
import { openFigure } from '$lib/server/services/figures/open-figure';
import { figureLinks } from '$lib/views/figure-links';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params, url }) => {
  const actor = memberIn(locals);
  const links = figureLinks(url);
  const { order, group, table, ...query } = massBalanceQuery.parse(Object.fromEntries(url.searchParams));
  const { subject, balance, notes } = await massBalanceView(actor, params.study, query, links.figureLink);
  const groups = [...new Set(balance.rows.map((row) => row.class))].filter((name) => name !== '').sort();
  const rows = balance.rows.filter((row) => group === '' || row.class === group);
  return {
    subject,
    balance: { ...balance, rows: orderMassBalance(rows, order) },
    notes,
    order,
    group,
    groups,
    table,
    figure: await openFigure(actor, params.study, links)
  };
};
