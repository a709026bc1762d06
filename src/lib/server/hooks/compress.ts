import { promisify } from 'node:util';
import { constants, gzip } from 'node:zlib';
import type { Handle } from '@sveltejs/kit';

const gzipAsync = promisify(gzip);
const worthIt = /^(text\/|application\/(json|problem\+json|javascript|xml)|image\/svg\+xml)/;

/** Below this the header costs more than the compression saves. */
const smallest = 1400;

/** Compresses pages and data whose size is known; what streams goes out as it comes, and files are packed already. */
export const compress: Handle = async ({ event, resolve }) => {
  const response = await resolve(event);
  const { headers } = response;
  if (!worthIt.test(headers.get('content-type') ?? '') || headers.has('content-encoding')) return response;
  headers.append('vary', 'accept-encoding');
  const accepts = /\bgzip\b(?!\s*;\s*q=0(\.0*)?\s*(,|$))/.test(
    event.request.headers.get('accept-encoding') ?? ''
  );
  if (!accepts || !response.body || Number(headers.get('content-length') ?? 0) < smallest) return response;
  const packed = await gzipAsync(await response.arrayBuffer(), { level: constants.Z_BEST_SPEED + 3 });
  const answer = new Headers(headers);
  answer.set('content-encoding', 'gzip');
  answer.set('content-length', String(packed.length));
  return new Response(new Uint8Array(packed), { status: response.status, headers: answer });
};
