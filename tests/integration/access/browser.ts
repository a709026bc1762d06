import { isHttpError, isRedirect, type Cookies, type RequestEvent } from '@sveltejs/kit';
import { ExpectedError } from '../../../src/lib/server/errors';
import { authenticate } from '../../../src/lib/server/hooks/authenticate';
import { authorize } from '../../../src/lib/server/hooks/authorize';

/** What came back: from a hook, a load, an action or an endpoint. */
export interface Answer {
  readonly status: number;
  readonly location: string | null;
  /** What the load or the action returned, or the message of the refusal. */
  readonly data: unknown;
}

type Work = (event: RequestEvent) => unknown;

interface Visit {
  readonly routeId: string;
  readonly path: string;
  readonly params?: Readonly<Record<string, string>>;
  /** The fields of a form; makes it a POST. */
  readonly form?: Readonly<Record<string, string>>;
  readonly address?: string;
  readonly headers?: Readonly<Record<string, string>>;
}

/** The status of a form that was not taken; null for anything else. */
function failedStatus(data: unknown): number | null {
  const failed = typeof data === 'object' && data !== null && 'status' in data && 'data' in data;
  return failed ? Number(data.status) : null;
}

/**
 * Stands in for a browser and for the framework's routing: sends requests through the real hooks, keeps the cookies,
 * and hands the event to the load, action or endpoint of the route.
 */
export class TestBrowser {
  readonly cookies = new Map<string, string>();
  /** Cookies as they were set last, with what was said of them. */
  readonly written = new Map<
    string,
    Readonly<{ secure?: boolean; httpOnly?: boolean; sameSite?: unknown }>
  >();

  constructor(readonly origin = 'http://localhost:3000') {}

  async visit(visit: Visit, work: Work): Promise<Answer> {
    const url = new URL(visit.path, this.origin);
    const request = new Request(url, {
      method: visit.form ? 'POST' : 'GET',
      headers: {
        ...visit.headers,
        host: url.host,
        origin: url.origin,
        cookie: [...this.cookies].map(([name, value]) => `${name}=${encodeURIComponent(value)}`).join('; ')
      },
      ...(visit.form ? { body: new URLSearchParams(visit.form) } : {})
    });
    const event = {
      url,
      request,
      params: visit.params ?? {},
      route: { id: visit.routeId },
      locals: { requestId: 'test', actor: null, keyScopes: null },
      cookies: this.jar(),
      getClientAddress: () => visit.address ?? '127.0.0.1',
      setHeaders: () => undefined,
      depends: () => undefined,
      isDataRequest: false,
      isSubRequest: false
    } as unknown as RequestEvent;
    let data: unknown = null;
    try {
      const response = await authenticate({
        event,
        resolve: (known) =>
          authorize({
            event: known,
            resolve: async (allowed) => {
              data = await work(allowed);
              return data instanceof Response ? data : new Response();
            }
          })
      });
      return { status: failedStatus(data) ?? response.status, location: null, data };
    } catch (thrown) {
      if (isRedirect(thrown)) return { status: thrown.status, location: thrown.location, data: null };
      if (isHttpError(thrown)) return { status: thrown.status, location: null, data: thrown.body.message };
      if (thrown instanceof ExpectedError)
        return { status: thrown.status, location: null, data: thrown.message };
      throw thrown;
    }
  }

  private jar(): Cookies {
    const sent = new Map(this.cookies);
    return {
      get: (name: string) => sent.get(name),
      getAll: () => [...sent].map(([name, value]) => ({ name, value })),
      set: (name: string, value: string, options: { maxAge?: number; secure?: boolean }) => {
        this.written.set(name, options);
        if (value === '' || options.maxAge === 0) this.cookies.delete(name);
        else this.cookies.set(name, value);
      },
      delete: (name: string) => this.cookies.delete(name)
    } as unknown as Cookies;
  }
}
