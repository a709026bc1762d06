import { fail, redirect } from '@sveltejs/kit';
import {
  duplicatePairForm,
  pairRemovalForm,
  validationChoiceForm,
  validationQuery
} from '$lib/schemas/validation';
import { subjectQuery } from '$lib/schemas/findings';
import { answerForm, checked } from '$lib/server/form-answer';
import { memberIn } from '$lib/server/hooks/member-in';
import { openFigure } from '$lib/server/services/figures/open-figure';
import {
  chooseValidationEvidence,
  declareDuplicates,
  takeBackDuplicates,
  validationView
} from '$lib/server/services/validation';
import { figureLinks } from '$lib/views/figure-links';
import { shortened } from './shortened';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params, url }) => {
  const actor = memberIn(locals);
  // One experiment by itself has a page of its own; older addresses lead there.
  const { experiment } = subjectQuery.parse(Object.fromEntries(url.searchParams));
  if (experiment !== undefined) redirect(308, `/studies/${params.study}/validation/experiment${url.search}`);
  const links = figureLinks(url);
  const query = validationQuery.parse(Object.fromEntries(url.searchParams));
  const view = await validationView(actor, params.study, query, links.figureLink);
  return {
    validation: shortened(view, query.all),
    all: query.all ?? null,
    choosing: query.choose ?? null,
    figure: await openFigure(actor, params.study, links)
  };
};

/** Back to the part, as the page stood: variant kept, form closed. */
function backTo(study: string, url: URL, part: string): never {
  const variant = url.searchParams.get('variant');
  const query = variant ? `?variant=${encodeURIComponent(variant)}` : '';
  redirect(303, `/studies/${study}/validation${query}#${part}`);
}

export const actions: Actions = {
  choose: async ({ request, locals, params: { study }, url }) => {
    let ticked: readonly FormDataEntryValue[] = [];
    const answer = await answerForm(request, async (fields, form) => {
      ticked = form.getAll('experiment');
      const sent = checked(validationChoiceForm, { ...fields, experiments: ticked });
      await chooseValidationEvidence(memberIn(locals), study, sent);
      backTo(study, url, sent.part);
    });
    // What was ticked comes back as one field, as all that was typed does.
    return fail(answer.status, {
      ...answer.data,
      values: { ...answer.data.values, experiment: ticked.join(',') }
    });
  },

  pair: ({ request, locals, params: { study }, url }) =>
    answerForm(request, async (fields) => {
      await declareDuplicates(memberIn(locals), study, checked(duplicatePairForm, fields));
      backTo(study, url, 'duplicates');
    }),

  unpair: ({ request, locals, params: { study }, url }) =>
    answerForm(request, async (fields) => {
      await takeBackDuplicates(memberIn(locals), study, checked(pairRemovalForm, fields));
      backTo(study, url, 'duplicates');
    })
};
