/**
 * Whether a request may change data or open a socket, judged by where its page came from.
 *
 * A page of this server has the host it was loaded from in `Origin`; a proxy that rewrites the host needs
 * SIDEWASH_ORIGIN. Programs without a browser send no `Origin`; the CSRF token still binds them.
 */
export function originAllowed(
  headers: { origin?: string | undefined; host?: string | undefined; 'sec-fetch-site'?: string | string[] | undefined },
  publicOrigins: readonly string[],
): boolean {
  const { origin, host } = headers;
  if (origin === undefined) {
    const site = headers['sec-fetch-site'];
    return site === undefined || site === 'same-origin' || site === 'none';
  }
  if (publicOrigins.includes(origin)) return true;
  return host !== undefined && URL.canParse(origin) && new URL(origin).host === host;
}
