/** The practice service speaks to this machine only. */

const NAMES = new Set(['127.0.0.1', 'localhost', '[::1]', '::1']);

/**
 * The Host header is checked as well as the address listened on: a web page elsewhere can point its own name at 127.0.0.1 and would
 * otherwise get in.
 */
export function isLoopbackHost(hostHeader: string | undefined): boolean {
  if (hostHeader === undefined) return false;
  return NAMES.has(hostHeader.replace(/:\d+$/, '').toLowerCase());
}

/** @throws RangeError for an address that is not this machine */
export function requireLoopbackUrl(address: string): URL {
  const url = new URL(address);
  if (!NAMES.has(url.hostname)) {
    throw new RangeError(`the practice service only talks to this machine: ${url.hostname} is not a loopback address`);
  }
  return url;
}
