/// <reference lib="webworker" />
import { clientsClaim } from 'workbox-core'
import { cleanupOutdatedCaches, createHandlerBoundToURL, precacheAndRoute } from 'workbox-precaching'
import { NavigationRoute, registerRoute } from 'workbox-routing'

declare const self: ServiceWorkerGlobalScope

// Only the shell of the field pages and what it is made of. It never opens the device's database and keeps nothing of /api.
precacheAndRoute(self.__WB_MANIFEST)
cleanupOutdatedCaches()
// Exactly '/w': with '/w/' the worker precaches but every navigation fails offline, without a word.
registerRoute(new NavigationRoute(createHandlerBoundToURL('/w'), { allowlist: [/^\/w(\/|$)/] }))
self.addEventListener('message', (event) => { if (event.data?.type === 'SKIP_WAITING') void self.skipWaiting() })
clientsClaim()
