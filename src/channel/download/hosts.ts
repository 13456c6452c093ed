/** To which addresses the bot's token may go, and from which files are taken. */
export interface HostRule {
  /** host and port of a practice service on this machine; undefined where the real service is used */
  readonly loopback: string | undefined;
}

const LOOPBACK = new Set(['127.0.0.1', 'localhost', '[::1]']);

/** Files of the service lie on these hosts and those below them. Source: File object page, docs.slack.dev. */
const SERVICE = ['slack.com', 'slack-edge.com', 'slack-files.com'] as const;

/** @param apiUrl another address of the API, if one is set; only one on this machine opens this machine */
export function hostRule(apiUrl: string | undefined): HostRule {
  if (apiUrl === undefined) return { loopback: undefined };
  const url = new URL(apiUrl);
  return { loopback: LOOPBACK.has(url.hostname) ? url.host : undefined };
}

/** Whether a file may be fetched from here and the token sent along: protects the token, and this network from being asked around in. */
export function isAllowed(url: URL, rule: HostRule): boolean {
  if (url.username !== '' || url.password !== '') return false;
  if (rule.loopback !== undefined && url.host === rule.loopback)
    return url.protocol === 'http:' || url.protocol === 'https:';
  if (url.protocol !== 'https:' || (url.port !== '' && url.port !== '443')) return false;
  return SERVICE.some((host) => url.hostname === host || url.hostname.endsWith(`.${host}`));
}
