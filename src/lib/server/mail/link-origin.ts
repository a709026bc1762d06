import { isLoopbackHost } from '../auth/loopback';
import type { Config } from '../config';

/**
 * The address that links in messages begin with. A request names its own host, and anybody can send a request that
 * names a foreign one: so only ORIGIN, or this machine itself, is taken for a link that carries a secret.
 * @param requestUrl the address of the request that causes the message
 */
export function linkOrigin(settings: Pick<Config, 'origin' | 'host' | 'port'>, requestUrl: URL): string {
  if (settings.origin !== null) return settings.origin;
  if (isLoopbackHost(requestUrl.hostname)) return requestUrl.origin;
  const anywhere = settings.host === '0.0.0.0' || settings.host === '::' || settings.host === '';
  const host = anywhere ? 'localhost' : settings.host.includes(':') ? `[${settings.host}]` : settings.host;
  return new URL(`http://${host}:${settings.port}`).origin;
}
