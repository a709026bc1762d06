import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { z } from 'zod';
import { demoAccounts } from '../../../seeders/demo-accounts';
import { apiSchemas } from '../../../src/lib/schemas/api/describe';
import { apiDocument } from '../../../src/lib/schemas/api/document';
import { operations, type Operation } from '../../../src/lib/schemas/api/operations';
import { problem } from '../../../src/lib/schemas/api/problem';
import { Membership } from '../../../src/lib/server/db/models/membership';
import { User } from '../../../src/lib/server/db/models/user';
import { memberOf } from '../../../src/lib/server/services/sessions';
import { makeAccessKey } from '../../../src/lib/server/services/access-keys';
import { useOwnDatabase } from '../database';
import { call, read } from './program';

/*
 * Every answer of the API, asked of the demo lab, is held against the schema that the description publishes for it: as the schema
 * stands in the source, which refuses members that it does not list, and as the published document has it.
 */
const database = await useOwnDatabase('demo');
afterAll(() => database.drop());

const params: Record<string, string> = { study: 'TARROW-1', experiment: '1', import: '' };
const queries: Record<string, Readonly<Record<string, string>>> = { getPortions: { experiment: '1' } };
let key = '';

const ask = (operation: Operation, query: Readonly<Record<string, string>> = {}) =>
  call({
    route: operation.routeId.replace('/api/v1', ''),
    params,
    query: { ...queries[operation.operationId], ...query },
    key
  });

/** A published schema as a reader of JSON Schema takes it, its references turned to where such a reader looks. */
function published(id: string): z.ZodType {
  const document = apiDocument() as { components: { schemas: Record<string, unknown> } };
  const text = JSON.stringify(document.components.schemas).replaceAll('#/components/schemas/', '#/$defs/');
  return z.fromJSONSchema({ $ref: `#/$defs/${id}`, $defs: JSON.parse(text) } as never);
}

/** Addresses that the figures of an answer open at. */
function figuresIn(value: unknown): readonly string[] {
  if (typeof value === 'string') {
    const found = /^\/api\/v1\/studies\/[^/]+\/provenance\?figure=(.+)$/.exec(value);
    return found?.[1] ? [decodeURIComponent(found[1])] : [];
  }
  return typeof value === 'object' && value !== null ? Object.values(value).flatMap(figuresIn) : [];
}

beforeAll(async () => {
  const email = demoAccounts.find(({ role }) => role === 'chemist')?.email ?? '';
  const user = await User.findOne({ where: { email } });
  const membership = await Membership.findOne({ where: { userId: user?.id ?? '' } });
  const chemist = await memberOf({
    userId: user?.id ?? '',
    sessionVersion: user?.sessionVersion ?? 0,
    labId: membership?.labId ?? ''
  });
  if (!chemist) throw new Error('the demo lab has no chemist');
  ({ key } = await makeAccessKey(chemist, { name: 'reader', scopes: ['read', 'import'], days: 1 }));
  const { body } = await read(
    await call({ route: '/studies/[study]/imports', params: { study: 'TARROW-1' }, key })
  );
  params.import = (body as { imports: readonly { id: string }[] }).imports[0]?.id ?? '';
  const balance = await read(
    await call({ route: '/studies/[study]/balance', params: { study: 'TARROW-1' }, key })
  );
  queries.openFigure = { figure: figuresIn(balance.body)[0] ?? '' };
});

const readings = operations.filter(({ method }) => method === 'get');

describe('an answer of the API', () => {
  it.each(readings.map((operation) => [operation.operationId, operation] as const))(
    'is what the description says: %s',
    async (_id, operation) => {
      const response = await ask(operation);
      expect(response.status).toBe(200);
      const type = response.headers.get('content-type')?.split(';')[0] ?? '';
      const schema = operation.answers[200]?.content[type];
      expect(schema, `${type} is not described`).toBeDefined();
      if (schema === 'file' || schema === undefined) {
        expect((await response.arrayBuffer()).byteLength).toBeGreaterThan(0);
        return;
      }
      const body: unknown = await response.json();
      expect(schema.parse(body)).toEqual(body);
      const id = apiSchemas.get(schema)?.id;
      if (id !== undefined) published(id).parse(body);
    }
  );

  it('opens every figure that it names, down to the cell', async () => {
    const openFigure = operations.find(({ operationId }) => operationId === 'openFigure');
    const balance = operations.find(({ operationId }) => operationId === 'getBalance');
    if (!openFigure || !balance) throw new Error('not described');
    const schema = openFigure.answers[200]?.content['application/json'];
    if (!schema || schema === 'file') throw new Error('not described as JSON');
    const seen = new Set<string>();
    let next = figuresIn((await read(await ask(balance))).body).slice(0, 3);
    let cells = 0;
    while (next.length > 0 && seen.size < 60) {
      const [figure = '', ...others] = next;
      next = others;
      if (seen.has(figure)) continue;
      seen.add(figure);
      const { status, body } = await read(await ask(openFigure, { figure }));
      expect(status, figure).toBe(200);
      schema.parse(body);
      published('Provenance').parse(body);
      cells += (body as { cells: readonly unknown[] }).cells.length;
      // The newest first, so that the walk goes down before it goes on.
      next = [...figuresIn(body), ...next];
    }
    expect(cells).toBeGreaterThan(0);
  });

  it('gives the same recoveries as JSON and as a table', async () => {
    const results = operations.find(({ operationId }) => operationId === 'getResults');
    if (!results) throw new Error('not described');
    const { body } = await read(await ask(results));
    const rows = (body as { results: { rows: readonly { name: string; mean: number | null }[] } }).results
      .rows;
    const response = await ask(results, { format: 'csv' });
    expect(response.headers.get('content-type')).toMatch(/^text\/csv/);
    const lines = (await response.text()).trim().split('\r\n').slice(1);
    expect(lines).toHaveLength(rows.length);
    expect(rows.length).toBeGreaterThan(5);
    for (const [index, { name, mean }] of rows.entries()) {
      expect(lines[index]).toContain(name);
      if (mean !== null) expect(lines[index]).toContain(`,${mean},`);
    }
  });

  it('is a described problem where something fails', async () => {
    for (const operation of readings.filter(({ routeId }) => routeId.includes('[study]'))) {
      const response = await call({
        route: operation.routeId.replace('/api/v1', ''),
        params: { ...params, study: 'NONE-1' },
        query: queries[operation.operationId] ?? {},
        key
      });
      const { status, body } = await read(response);
      expect(status, operation.operationId).toBe(404);
      expect(response.headers.get('content-type')).toBe('application/problem+json');
      problem.parse(body);
      published('Problem').parse(body);
    }
  });
});
