import { expect, type APIRequestContext } from '@playwright/test';

/** A value for each parameter that a route can have, keyed by the segment before it: "studies/[study]". */
export type Examples = Readonly<Record<string, string>>;

/** What an address needs after its path; `{name}` stands for an example. */
export const queries: Readonly<Record<string, string>> = {
  '/api/v1/studies/[study]/portions': '?experiment={experiments/[experiment]}',
  '/api/v1/studies/[study]/provenance': '?figure={figure}'
};

const nobodysId = '01999999-0000-7000-8000-00000000dead';
const madeUpToken = 'a'.repeat(43);

/** Values that nobody has. They are of the right form, so that only their absence can be noticed. */
export const nothing: Examples = {
  'studies/[study]': 'NO-SUCH-STUDY',
  'experiments/[experiment]': '999',
  'variants/[variant]': 'ZZ',
  'data/[import]': nobodysId,
  'imports/[import]': nobodysId,
  'calibration/[set]': nobodysId,
  'sequences/[sequence]': nobodysId,
  'checks/[check]': nobodysId,
  'criteria/[set]': nobodysId,
  'analytes/[analyte]': nobodysId,
  'reset-password/[token]': madeUpToken,
  'invitations/[token]': madeUpToken,
  figure: `recovery:999:${nobodysId}`
};

async function firstMatch(request: APIRequestContext, page: string, pattern: RegExp): Promise<string> {
  const text = await (await request.get(page, { headers: { accept: 'text/html' } })).text();
  const found = pattern.exec(text)?.[1];
  expect(found, `${page} should have an address like ${pattern}`).toBeDefined();
  return decodeURIComponent(found ?? '');
}

/** Things of the demo lab that are there, their ids read from its pages; the tokens alone are made up. */
export async function readExamples(request: APIRequestContext): Promise<Examples> {
  const study = '/studies/TARROW-1';
  const idBelow = (page: string) =>
    firstMatch(request, page, new RegExp(`${page}/([0-9a-f]{8}-[0-9a-f-]{27})`));
  const set = await idBelow(`${study}/calibration`);
  const ofImport = await idBelow(`${study}/data`);
  return {
    'studies/[study]': 'TARROW-1',
    'experiments/[experiment]': '1',
    'variants/[variant]': 'A',
    'data/[import]': ofImport,
    'imports/[import]': ofImport,
    'calibration/[set]': set,
    'sequences/[sequence]': await firstMatch(
      request,
      `${study}/calibration`,
      /calibration\/sequences\/([0-9a-f]{8}-[0-9a-f-]{27})/
    ),
    'checks/[check]': await idBelow(`${study}/calibration/${set}/checks`),
    'criteria/[set]': await idBelow('/library/criteria'),
    'analytes/[analyte]': await idBelow('/library/analytes'),
    'reset-password/[token]': madeUpToken,
    'invitations/[token]': madeUpToken,
    figure: await firstMatch(request, `${study}/balance`, /[?&;]figure=([^"&]+)/)
  };
}
