import { render } from 'svelte/server';
import MassBalanceFigure from '$lib/charts/MassBalanceFigure.svelte';
import { orderMassBalance } from '$lib/charts/mass-balance-order';
import { dayText } from '$lib/domain/moment-text';
import { massBalanceQuery } from '$lib/schemas/findings';
import { NotFound } from '$lib/server/errors';
import { memberIn } from '$lib/server/hooks/member-in';
import { attachment } from '$lib/server/http/attachment';
import { svgFile } from '$lib/server/reports/drawing';
import { massBalanceView } from '$lib/server/services/results';
import { getStudy } from '$lib/server/services/studies';
import type { RequestHandler } from './$types';

/** The mass balance as it stands on its page, as a drawing that stands by itself. */
export const GET: RequestHandler = async ({ locals, params, url }) => {
  const actor = memberIn(locals);
  const { order, group, ...query } = massBalanceQuery.parse(Object.fromEntries(url.searchParams));
  const { title, revision, state } = await getStudy(actor, params.study);
  const { subject, balance } = await massBalanceView(actor, params.study, query, (address) => address);
  if (!subject.experiment) throw new NotFound('There is no experiment to draw yet.');
  const rows = balance.rows.filter((row) => group === '' || row.class === group);
  const { number } = subject.experiment;
  const { body } = render(MassBalanceFigure, {
    props: {
      view: { ...balance, rows: orderMassBalance(rows, order) },
      title: `Mass balance${subject.variant ? `, variant ${subject.variant.code}` : ''}, experiment ${number}`,
      source: [
        `${title}. ${params.study}, revision ${revision}, ${state}`,
        actor.labName,
        ...(actor.labIsDemo ? ['Invented demo data'] : []),
        dayText(new Date().toISOString())
      ].join('. ')
    }
  });
  const bytes = new TextEncoder().encode(svgFile(body));
  return attachment(`${params.study}-experiment-${number}-mass-balance.svg`, bytes, 'image/svg+xml');
};
