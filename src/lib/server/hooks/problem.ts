import { ExpectedError } from '../errors';
import { logger } from '../logger';
import { toHttp, type HttpFailure } from './error';

/** Titles of problems, by the code of the error. */
const titles: Readonly<Record<string, string>> = {
  'not-found': 'Not found',
  unauthenticated: 'Not signed in',
  forbidden: 'Not allowed',
  invalid: 'Entries need mending',
  conflict: 'Changed meanwhile',
  'too-large': 'Too large',
  unsupported: 'Kind not taken',
  'file-problems': 'The file needs mending',
  'too-many-requests': 'Too many attempts',
  unforeseen: 'Failed'
};

/** The body of an API failure (RFC 9457), members beyond the standard ones as in App.Error. */
export function problemBody({ status, body }: HttpFailure): Readonly<Record<string, unknown>> {
  const { message, code, errorId, ...rest } = body;
  return {
    type: 'about:blank',
    title: titles[code ?? ''] ?? 'Refused',
    status,
    detail: message,
    ...(code === undefined ? {} : { code }),
    ...(errorId === undefined ? {} : { instance: `urn:uuid:${errorId}` }),
    ...rest
  };
}

/** Answers a failure of the API as problem+json. An unforeseen one is logged under the id that the answer tells. */
export function problemResponse(failure: unknown): Response {
  if (!(failure instanceof ExpectedError)) logger.error({ err: failure }, 'unexpected error');
  return problemFrom(toHttp(failure));
}

/** The problem+json response for a mapped failure. */
export function problemFrom(mapped: HttpFailure): Response {
  const headers = new Headers({ 'content-type': 'application/problem+json', 'cache-control': 'no-store' });
  // RFC 9110 asks for a challenge with every 401.
  if (mapped.status === 401) headers.set('www-authenticate', 'Bearer realm="headwater"');
  if (mapped.body.retryAfterSeconds !== undefined)
    headers.set('retry-after', String(mapped.body.retryAfterSeconds));
  return new Response(JSON.stringify(problemBody(mapped)), { status: mapped.status, headers });
}
