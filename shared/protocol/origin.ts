/** Whom a browser thinks it is talking to, and from whose page it does so. */

const LOOPBACK_NAMES: readonly string[] = ['localhost', '127.0.0.1', '[::1]'];

/** Only programs of this machine reach a server that listens on this address (RFC 1122 §3.2.1.3, RFC 4291 §2.5.3). */
const isLoopback = (listensOn: string): boolean =>
  listensOn === 'localhost' || listensOn === '::1' || /^127(\.\d+){3}$/.test(listensOn);

/** The host of a `Host` field without its port, in lower case; null where it is none (RFC 9110 §7.2). */
export const hostName = (field: string | undefined): string | null =>
  /^(\[[0-9a-f:.]+\]|[a-z0-9._-]+)(?::\d{1,5})?$/.exec(field?.toLowerCase() ?? '')?.[1] ?? null;

/**
 * May a request that names this host be answered? On loopback only the names of
 * loopback and the address listened on: another name that leads here is a page
 * whose name was bound to this machine after it was loaded.
 */
export const hostAllowed = (field: string | undefined, listensOn: string): boolean => {
  const name = hostName(field);
  if (name === null || !isLoopback(listensOn)) return name !== null;
  return LOOPBACK_NAMES.includes(name) || name === listensOn;
};

/** Does an `Origin` field (RFC 6454 §7) name the host and port of the `Host` field? */
export const sameOrigin = (origin: string, field: string | undefined): boolean => {
  const authority = /^https?:\/\/([^/]+)$/.exec(origin.toLowerCase())?.[1];
  return authority !== undefined && authority === field?.toLowerCase();
};
