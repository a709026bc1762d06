import { redirect } from '@sveltejs/kit';
import { exclusionForm, liftForm } from '$lib/schemas/exclusion';
import { observationForm, replicatesForm, replicateSpikeForm } from '$lib/schemas/experiment';
import { formObject } from '$lib/schemas/form-object';
import { answerForm, checked } from '$lib/server/form-answer';
import { memberIn } from '$lib/server/hooks/member-in';
import { exclude, lift, recentCauses } from '$lib/server/services/exclusions';
import { getExperiment } from '$lib/server/services/experiments';
import { getPanel } from '$lib/server/services/panels';
import {
  addReplicates,
  recordObservation,
  removeReplicate,
  setReplicateSpike,
  updateReplicate
} from '$lib/server/services/replicates';
import { replicateChangeForm } from '$lib/schemas/experiment';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params, url }) => {
  const actor = memberIn(locals);
  const experiment = await getExperiment(actor, params.study, Number(params.experiment));
  const panel = await getPanel(actor, params.study);
  const asked = (name: string) => url.searchParams.get(name);
  const opened = experiment.replicates.find(({ id }) => id === asked('preparation')) ?? null;
  return {
    experiment,
    panel: panel.map(({ id, role, analyte }) => ({ id, role, analyteId: analyte.id, name: analyte.name })),
    opened,
    aside: experiment.replicates.find(({ id }) => id === asked('aside')) ?? null,
    lifting: experiment.exclusions.find(({ id, lifted }) => id === asked('lift') && lifted === null) ?? null,
    asked: { fraction: asked('fraction') ?? '', analyte: asked('analyte') ?? '' },
    causes: await recentCauses(actor),
    done: asked('done')
  };
};

type Parameters = { readonly study: string; readonly experiment: string };

/** Answers a form of this page, then shows the page again with a word on what was done. */
const answer = (
  { request, locals, params }: { request: Request; locals: App.Locals; params: Parameters },
  done: string,
  work: (
    actor: ReturnType<typeof memberIn>,
    number: number,
    sent: Record<string, unknown>
  ) => Promise<unknown>
) =>
  answerForm(request, async (_fields, form) => {
    await work(memberIn(locals), Number(params.experiment), formObject(form));
    redirect(303, `/studies/${params.study}/experiments/${params.experiment}?done=${done}`);
  });

export const actions: Actions = {
  exclude: (event) =>
    answer(event, 'excluded', (actor, number, sent) =>
      exclude(actor, event.params.study, number, checked(exclusionForm, sent))
    ),
  lift: (event) =>
    answer(event, 'lifted', (actor, _number, sent) =>
      lift(actor, event.params.study, checked(liftForm, sent))
    ),
  add: (event) =>
    answer(event, 'added', (actor, number, sent) =>
      addReplicates(actor, event.params.study, number, checked(replicatesForm, sent))
    ),
  preparation: (event) =>
    answer(event, 'preparation', (actor, number, sent) =>
      updateReplicate(actor, event.params.study, number, checked(replicateChangeForm, sent))
    ),
  observe: (event) =>
    answer(event, 'observed', (actor, number, sent) =>
      recordObservation(actor, event.params.study, number, checked(observationForm, sent))
    ),
  spike: (event) =>
    answer(event, 'spiked', (actor, number, sent) =>
      setReplicateSpike(actor, event.params.study, number, checked(replicateSpikeForm, sent))
    ),
  remove: (event) =>
    answer(event, 'removed', (actor, number, sent) =>
      removeReplicate(actor, event.params.study, number, String(sent.replicateId ?? ''))
    )
};
