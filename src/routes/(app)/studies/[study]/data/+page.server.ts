import { redirect } from '@sveltejs/kit';
import { uploadForm, withdrawForm } from '$lib/schemas/imports';
import { Invalid } from '$lib/server/errors';
import { answerForm, checked } from '$lib/server/form-answer';
import { memberIn } from '$lib/server/hooks/member-in';
import { isAllowed } from '$lib/domain/permissions';
import { experimentChoices } from '$lib/server/services/data-templates';
import { listImports, receiveFile, withdrawImport } from '$lib/server/services/imports';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params, url }) => {
  const actor = memberIn(locals);
  return {
    imports: await listImports(actor, params.study),
    experiments: await experimentChoices(actor, params.study),
    chosen: url.searchParams.get('experiment') ?? '',
    mayEnter: isAllowed(actor.role, 'data.enter')
  };
};

export const actions: Actions = {
  upload: ({ locals, params, request }) =>
    answerForm(request, async (fields, form) => {
      const actor = memberIn(locals);
      const file = form.get('file');
      if (!(file instanceof File) || file.name === '') {
        throw Invalid.at('file', 'No file was chosen. Choose the spreadsheet that holds the values.');
      }
      const { experiment } = checked(uploadForm, fields);
      const received = await receiveFile(actor, params.study, {
        fileName: file.name,
        bytes: Buffer.from(await file.arrayBuffer()),
        experimentNumber: experiment
      });
      const again = received.storedBefore ? '?again=1' : '';
      redirect(303, `/studies/${params.study}/data/${received.importId}${again}`);
    }),

  withdraw: ({ locals, params, request }) =>
    answerForm(request, async (fields) => {
      const input = checked(withdrawForm, fields);
      await withdrawImport(memberIn(locals), params.study, input.import, input.reason);
      redirect(303, `/studies/${params.study}/data`);
    })
};
