/** True for an address of this machine itself, in any of the forms a socket reports. */
export function isLoopbackAddress(address: string): boolean {
  const plain = address.replace(/^::ffff:/i, '');
  return plain === '::1' || /^127(\.\d{1,3}){3}$/.test(plain);
}

/** True for a host name (as `URL.hostname` gives it) that means this machine itself. */
export function isLoopbackHost(hostname: string): boolean {
  return hostname === 'localhost' || isLoopbackAddress(hostname.replace(/^\[|\]$/g, ''));
}
