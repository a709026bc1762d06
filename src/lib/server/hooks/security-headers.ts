import type { Handle } from '@sveltejs/kit';

/** Pages bring their own policy, with nonces (svelte.config.js); whatever else is opened by itself may load nothing. */
const policyForFiles =
  "default-src 'none'; style-src 'unsafe-inline'; img-src data:; frame-ancestors 'none'; base-uri 'none'; form-action 'none'";

const fixed: readonly (readonly [string, string])[] = [
  ['x-content-type-options', 'nosniff'],
  ['x-frame-options', 'DENY'],
  ['referrer-policy', 'same-origin'],
  ['cross-origin-opener-policy', 'same-origin'],
  ['cross-origin-resource-policy', 'same-origin'],
  ['permissions-policy', 'camera=(), geolocation=(), microphone=(), payment=(), usb=()']
];

/** Adds the headers that tell a browser what this site never does. */
export const secureHeaders: Handle = async ({ event, resolve }) => {
  const response = await resolve(event);
  for (const [name, value] of fixed) {
    if (!response.headers.has(name)) response.headers.set(name, value);
  }
  if (!response.headers.has('content-security-policy')) {
    response.headers.set('content-security-policy', policyForFiles);
  }
  if (event.url.protocol === 'https:') response.headers.set('strict-transport-security', 'max-age=31536000');
  // What a signed-in person was shown may lie in nobody else's cache.
  if (!response.headers.has('cache-control')) response.headers.set('cache-control', 'private, no-cache');
  return response;
};
