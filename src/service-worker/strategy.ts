export type Answer =
  | { from: 'network' }
  /** This precached page, whatever the network does. */
  | { from: 'shell'; page: string }
  /** Network first, then this precached page. */
  | { from: 'network-or-shell'; page: string };

const TUB = /^\/b\/[a-z0-9-]{4,14}$/i;
const SERVER_ONLY = /^\/(api|office)(\/|$)/;

/** How a navigation is answered: a tub's link by one shell, online and offline; the server's pages only by the server. */
export function answerNavigation(pathname: string): Answer {
  const path = pathname.length > 1 ? pathname.replace(/\/+$/, '') : pathname;
  if (SERVER_ONLY.test(path)) return { from: 'network' };
  if (TUB.test(path)) return { from: 'shell', page: '/shell/bucket' };
  return { from: 'network-or-shell', page: path };
}
