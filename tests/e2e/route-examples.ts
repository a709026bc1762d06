import { expect, type APIRequestContext } from '@playwright/test';

/** A value for each parameter that a route can have. */
export type Examples = Readonly<Record<string, string>>;

/** What an address needs after its path; `{name}` stands for an example. */
export const queries: Readonly<Record<string, string>> = {
  '/api/v1/studies/[study]/portions': '?experiment={experiment}',
  '/api/v1/studies/[study]/provenance': '?figure={figure}'
};

/** Values that nobody has. They are of the right form, so that only their absence can be noticed. */
export const nothing: Examples = {
  study: 'NO-SUCH-STUDY',
  experiment: '999',
  import: '01999999-0000-7000-8000-00000000dead',
  variant: 'ZZ',
  figure: 'recovery:999:01999999-0000-7000-8000-00000000dead',
  token: 'a'.repeat(43)
};

async function firstMatch(request: APIRequestContext, page: string, pattern: RegExp): Promise<string> {
  const text = await (await request.get(page, { headers: { accept: 'text/html' } })).text();
  const found = pattern.exec(text)?.[1];
  expect(found, `${page} should have an address like ${pattern}`).toBeDefined();
  return decodeURIComponent(found ?? '');
}

const uuid = '[0-9a-f]{8}-[0-9a-f-]{27}';
const study = 'TARROW-1';

/** Things of the demo lab that are there, read from its pages; the token alone is made up. */
export async function readExamples(request: APIRequestContext): Promise<Examples> {
  return {
    study,
    experiment: '1',
    variant: 'A',
    figure: await firstMatch(request, `/studies/${study}/balance`, /[?&;]figure=([^"&]+)/),
    import: await firstMatch(
      request,
      `/studies/${study}/data`,
      new RegExp(`/studies/${study}/data/(${uuid})`)
    ),
    token: 'a'.repeat(43)
  };
}
