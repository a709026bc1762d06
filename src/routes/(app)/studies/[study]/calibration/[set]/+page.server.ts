import { redirect } from '@sveltejs/kit';
import { fitsForm, proposalQuery } from '$lib/schemas/calibration';
import { formObject } from '$lib/schemas/form-object';
import { Invalid } from '$lib/server/errors';
import { answerForm, checked } from '$lib/server/form-answer';
import { memberIn } from '$lib/server/hooks/member-in';
import { chooseFits, proposeFits } from '$lib/server/services/calibration-choices';
import { getCalibrationFit, getCalibrationSet } from '$lib/server/services/calibrations';
import { openFigure } from '$lib/server/services/figures/open-figure';
import { getPanel } from '$lib/server/services/panels';
import type { CalibrationSetView, ProposedFitsView } from '$lib/views/calibration';
import { figureLinks } from '$lib/views/figure-links';
import type { Actions, PageServerLoad } from './$types';
import { overviewRow, standingSentence } from './overview-row';

interface Asked {
  readonly proposal: ProposedFitsView | null;
  /** The address asks for all analytes of the set, whatever is ticked. */
  readonly all: boolean;
  readonly levels: 'keep' | 'these';
  readonly levelsLeftOut: readonly string[];
  readonly errors: Readonly<Record<string, string>>;
}

/** What the address proposes, and what that would move; what is wrong with it is told at its field. */
async function askedOf(
  actor: ReturnType<typeof memberIn>,
  study: string,
  set: CalibrationSetView,
  url: URL
): Promise<Asked> {
  const nothing: Asked = { proposal: null, all: false, levels: 'these', levelsLeftOut: [], errors: {} };
  if (!url.searchParams.has('model')) return nothing;
  const form = new FormData();
  for (const [name, value] of url.searchParams) form.append(name, value);
  const all = form.getAll('entries').includes('all');
  if (all) {
    form.delete('entries');
    for (const { entryId } of set.fits) form.append('entries', entryId);
  }
  const sent = formObject(form);
  try {
    const asked = checked(proposalQuery, sent);
    const { levels, levelsLeftOut } = asked;
    return {
      all,
      levels,
      levelsLeftOut,
      errors: {},
      proposal: await proposeFits(actor, study, set.id, asked)
    };
  } catch (error) {
    if (!(error instanceof Invalid)) throw error;
    const errors: Record<string, string> = {};
    // One of a list is told at the list.
    for (const { path, message } of error.problems) errors[path.split('.')[0] ?? path] ??= message;
    return {
      ...nothing,
      all,
      levels: sent.levels === 'keep' ? 'keep' : 'these',
      levelsLeftOut: form.getAll('levelsLeftOut').map(String),
      errors
    };
  }
}

export const load: PageServerLoad = async ({ locals, params, url }) => {
  const actor = memberIn(locals);
  const set = await getCalibrationSet(actor, params.study, params.set);
  const panel = await getPanel(actor, params.study);
  const analyte = url.searchParams.get('analyte');
  const asked = await askedOf(actor, params.study, set, url);
  const { proposal } = asked;
  const proposed =
    proposal && analyte !== null && proposal.entries.some(({ entryId }) => entryId === analyte)
      ? { model: proposal.model, weighting: proposal.weighting, levelsLeftOut: asked.levelsLeftOut }
      : null;
  const links = figureLinks(url);
  const { fits, ...rest } = set;
  const fit = analyte === null ? null : await getCalibrationFit(actor, params.study, set, analyte, proposed);
  const isLogarithmic = url.searchParams.get('axes') === 'logarithmic';
  const otherAxes = new URLSearchParams(url.searchParams);
  if (isLogarithmic) otherAxes.delete('axes');
  else otherAxes.set('axes', 'logarithmic');
  return {
    set: rest,
    sentence: standingSentence(set),
    rows: fits.map(overviewRow),
    names: Object.fromEntries(panel.map(({ id, analyte: { name } }) => [id, name])),
    fit,
    asked,
    query: url.searchParams.toString(),
    axes: isLogarithmic ? ('logarithmic' as const) : ('even' as const),
    axesHref: `?${otherAxes}#fit`,
    provenanceHref: fit?.provenance ? links.figureLink(fit.provenance) : null,
    done: url.searchParams.get('done'),
    figure: await openFigure(actor, params.study, links)
  };
};

export const actions: Actions = {
  choose: ({ request, locals, params, url }) =>
    answerForm(request, async (_fields, form) => {
      const asked = checked(fitsForm, formObject(form));
      await chooseFits(memberIn(locals), params.study, params.set, asked);
      const analyte = url.searchParams.get('analyte');
      const back = `/studies/${params.study}/calibration/${params.set}`;
      redirect(303, analyte ? `${back}?analyte=${analyte}&done=chosen#fit` : `${back}?done=chosen`);
    })
};
