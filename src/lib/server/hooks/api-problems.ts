import type { Handle } from '@sveltejs/kit';
import { problemFrom } from './problem';

const isApi = (pathname: string): boolean => pathname === '/api' || pathname.startsWith('/api/');

/** Every failure of the API answers as problem+json, also those that the framework makes up by itself. */
export const describeApiProblems: Handle = async ({ event, resolve }) => {
  if (!isApi(event.url.pathname)) return resolve(event);
  // Otherwise a program that names no type is answered with a page.
  event.request.headers.set('accept', 'application/json');
  const response = await resolve(event);
  if (response.status < 400 || response.headers.get('content-type')?.startsWith('application/problem+json')) {
    return response;
  }
  const answer = problemFrom({ status: response.status, body: await failureIn(response) });
  for (const [name, value] of response.headers) {
    if (name === 'allow' || name === 'set-cookie') answer.headers.append(name, value);
  }
  return answer;
};

async function failureIn(response: Response): Promise<App.Error> {
  if (response.headers.get('content-type')?.startsWith('application/json')) {
    const body: unknown = await response.json();
    if (typeof body === 'object' && body !== null && 'message' in body) return body as App.Error;
  }
  if (response.status === 404) return { message: 'There is nothing at this address.', code: 'not-found' };
  if (response.status === 405)
    return { message: 'This address does not take requests of that kind.', code: 'refused' };
  return { message: 'The request was refused.', code: 'refused' };
}
