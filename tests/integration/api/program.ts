import type { RequestEvent, RequestHandler } from '@sveltejs/kit';
import { ExpectedError } from '../../../src/lib/server/errors';
import { describeApiProblems } from '../../../src/lib/server/hooks/api-problems';
import { authenticate } from '../../../src/lib/server/hooks/authenticate';
import { authorize } from '../../../src/lib/server/hooks/authorize';
import { problemResponse } from '../../../src/lib/server/hooks/problem';

const endpoints = import.meta.glob<Readonly<Record<string, RequestHandler>>>(
  '../../../src/routes/api/v1/**/+server.ts'
);

const origin = 'http://localhost:3000';

/** What a program sends. */
export interface Call {
  /** As the framework names it, without "/api/v1": "/studies/[study]". */
  readonly route: string;
  readonly params?: Readonly<Record<string, string>>;
  readonly query?: Readonly<Record<string, string>>;
  readonly method?: 'GET' | 'POST';
  /** The access key; null: none is sent. */
  readonly key: string | null;
  readonly headers?: Readonly<Record<string, string>>;
  readonly body?: BodyInit;
  readonly address?: string;
}

/** Sends a request through the real hooks to the endpoint of its route, as the framework would. */
export async function call(sent: Call): Promise<Response> {
  const routeId = `/api/v1${sent.route}`;
  const params = sent.params ?? {};
  const path = routeId.replace(/\[([a-z]+)\]/g, (_all, name: string) =>
    encodeURIComponent(params[name] ?? '')
  );
  const url = new URL(`${path}?${new URLSearchParams(sent.query).toString()}`, origin);
  const request = new Request(url, {
    method: sent.method ?? (sent.body === undefined ? 'GET' : 'POST'),
    headers: {
      ...sent.headers,
      ...(sent.key === null ? {} : { authorization: `Bearer ${sent.key}` })
    },
    ...(sent.body === undefined ? {} : { body: sent.body, duplex: 'half' })
  } as RequestInit);
  const event = {
    url,
    request,
    params,
    route: { id: routeId },
    locals: { requestId: 'test', actor: null, keyScopes: null },
    cookies: { get: () => undefined, getAll: () => [], set: () => undefined, delete: () => undefined },
    getClientAddress: () => sent.address ?? '127.0.0.1',
    setHeaders: () => undefined
  } as unknown as RequestEvent;
  return describeApiProblems({
    event,
    resolve: (described) =>
      authenticate({
        event: described,
        resolve: (known) => authorize({ event: known, resolve: (allowed) => answer(routeId, allowed) })
      })
  });
}

async function answer(routeId: string, event: RequestEvent): Promise<Response> {
  const load = endpoints[`../../../src/routes${routeId}/+server.ts`];
  if (!load) throw new Error(`there is no endpoint ${routeId}`);
  const handler = (await load())[event.request.method];
  if (!handler) return new Response(null, { status: 405 });
  try {
    return await handler(event as Parameters<RequestHandler>[0]);
  } catch (refusal) {
    if (refusal instanceof ExpectedError) return problemResponse(refusal);
    throw refusal;
  }
}

/** The status of an answer beside its body. */
export async function read(response: Response): Promise<Readonly<{ status: number; body: unknown }>> {
  const type = response.headers.get('content-type') ?? '';
  return {
    status: response.status,
    body: type.includes('json') ? await response.json() : await response.text()
  };
}
