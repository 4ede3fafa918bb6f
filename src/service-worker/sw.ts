/// <reference lib="webworker" />
import { clientsClaim } from 'workbox-core';
import { cleanupOutdatedCaches, matchPrecache, precacheAndRoute } from 'workbox-precaching';
import { NavigationRoute, registerRoute } from 'workbox-routing';
import { answerNavigation } from './strategy.ts';

declare const self: ServiceWorkerGlobalScope;

cleanupOutdatedCaches();
// Shells come from the cache first, whatever their query says.
precacheAndRoute(self.__WB_MANIFEST, { ignoreURLParametersMatching: [/.*/] });
clientsClaim();

self.addEventListener('message', (event) => {
  if ((event.data as { type?: string } | null)?.type === 'SKIP_WAITING') void self.skipWaiting();
});

registerRoute(
  new NavigationRoute(async ({ request, url }) => {
    const answer = answerNavigation(url.pathname);
    if (answer.from === 'network') return fetch(request);
    if (answer.from === 'shell') return (await matchPrecache(answer.page)) ?? fetch(request);
    try {
      return await fetch(request);
    } catch {
      return (await matchPrecache(answer.page)) ?? (await matchPrecache('/')) ?? Response.error();
    }
  }),
);
