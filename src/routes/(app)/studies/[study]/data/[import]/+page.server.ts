import { redirect } from '@sveltejs/kit';
import { isAllowed } from '$lib/domain/permissions';
import {
  assignForm,
  columnForm,
  keepMapForm,
  labelsForm,
  mendForm,
  sheetForm,
  tableForm,
  unmendForm
} from '$lib/schemas/import-mapping';
import { formObject } from '$lib/schemas/form-object';
import { declareForm, previewQuery, storeForm, withdrawForm } from '$lib/schemas/imports';
import { answerForm, checked } from '$lib/server/form-answer';
import { memberIn } from '$lib/server/hooks/member-in';
import { keepColumnMap, listColumnMaps } from '$lib/server/services/column-maps';
import { assignLabel, changeMap, mendCell, resetMap, unmendCell } from '$lib/server/services/import-mapping';
import { previewImport } from '$lib/server/services/import-preview';
import { storeImport } from '$lib/server/services/import-storing';
import { declareAboutImport, dropImport, listImports, withdrawImport } from '$lib/server/services/imports';
import { listSequences } from '$lib/server/services/sequences';
import type { Actions, PageServerLoad, RequestEvent } from './$types';
import { tableChange } from './table-change';

export const load: PageServerLoad = async ({ locals, params, url }) => {
  const actor = memberIn(locals);
  const window = previewQuery.parse(Object.fromEntries(url.searchParams));
  const preview = await previewImport(actor, params.study, params.import, window);
  const listed = (await listImports(actor, params.study)).find(({ id }) => id === preview.id) ?? null;
  return {
    preview,
    listed,
    sequences:
      preview.state === 'stored'
        ? (await listSequences(actor, params.study)).filter(({ importIds }) => importIds.includes(preview.id))
        : [],
    again: url.searchParams.has('again'),
    stored: url.searchParams.has('stored'),
    layouts: (await listColumnMaps(actor)).map(({ name }) => name),
    mayEnter: isAllowed(actor.role, 'data.enter')
  };
};

const address = (params: { study: string; import: string }): string =>
  `/studies/${params.study}/data/${params.import}`;

/** The page as it was looked at, without the form that was sent. */
function back(params: { study: string; import: string }, url: URL, hash = ''): string {
  const kept = ['sheet', 'fromRow', 'fromRecord'].flatMap((name) => {
    const value = url.searchParams.get(name);
    return value === null ? [] : [[name, value]];
  });
  return `${address(params)}?${new URLSearchParams(kept).toString()}${hash}`;
}

/** Answers a form that changes how the file is read, then shows the file read so. */
const reread = (
  { locals, params, request, url }: RequestEvent,
  hash: string,
  change: (
    actor: ReturnType<typeof memberIn>,
    place: readonly [string, string],
    fields: Readonly<Record<string, string>>
  ) => Promise<unknown>
) =>
  answerForm(request, async (fields) => {
    await change(memberIn(locals), [params.study, params.import], fields);
    redirect(303, back(params, url, hash));
  });

export const actions: Actions = {
  column: (event) =>
    reread(event, '#sheet', (actor, place, fields) => {
      const { sheet, ...column } = checked(columnForm, fields);
      return changeMap(actor, ...place, { what: 'column', sheet, column });
    }),

  table: (event) =>
    reread(event, '#sheet', (actor, place, fields) =>
      changeMap(actor, ...place, tableChange(checked(tableForm, fields)))
    ),

  sheet: (event) =>
    reread(event, '#sheet', (actor, place, fields) => {
      const { sheet, read } = checked(sheetForm, fields);
      return changeMap(actor, ...place, { what: 'sheet', sheet, isRead: read });
    }),

  labels: (event) =>
    reread(event, '#labels', (actor, place, fields) => {
      const { pattern, matching, experiment, fraction } = checked(labelsForm, fields);
      return changeMap(actor, ...place, {
        what: 'labels',
        samplePattern: pattern,
        matching,
        fixed: { experiment, fraction }
      });
    }),

  assign: (event) =>
    reread(event, '#labels', (actor, place, fields) =>
      assignLabel(actor, ...place, checked(assignForm, fields))
    ),

  mend: (event) =>
    reread(event, '#problems', (actor, place, fields) =>
      mendCell(actor, ...place, checked(mendForm, fields))
    ),

  unmend: (event) =>
    reread(event, '#problems', (actor, place, fields) =>
      unmendCell(actor, ...place, checked(unmendForm, fields))
    ),

  reset: (event) => reread(event, '#layout', (actor, place) => resetMap(actor, ...place)),

  keep: (event) =>
    reread(event, '#layout', (actor, place, fields) =>
      keepColumnMap(actor, ...place, checked(keepMapForm, fields).name)
    ),

  declare: ({ locals, params, request }) =>
    answerForm(request, async (fields) => {
      await declareAboutImport(memberIn(locals), params.study, params.import, checked(declareForm, fields));
      redirect(303, address(params));
    }),

  store: ({ locals, params, request }) =>
    answerForm(request, async (_fields, form) => {
      const { questions, reason, supersedes } = checked(storeForm, formObject(form));
      await storeImport(memberIn(locals), params.study, params.import, {
        questionsConfirmed: questions,
        reason,
        supersedes
      });
      redirect(303, `${address(params)}?stored=1`);
    }),

  drop: ({ locals, params, request }) =>
    answerForm(request, async () => {
      await dropImport(memberIn(locals), params.study, params.import);
      redirect(303, `/studies/${params.study}/data`);
    }),

  withdraw: ({ locals, params, request }) =>
    answerForm(request, async (fields) => {
      await withdrawImport(
        memberIn(locals),
        params.study,
        params.import,
        checked(withdrawForm, fields).reason
      );
      redirect(303, `/studies/${params.study}/data`);
    })
};
