/// <reference types="astro/client" />
/// <reference types="vite-plugin-pwa/client" />

declare namespace App {
  interface Locals {
    person: import('#server/auth/sessions.ts').SignedIn | undefined;
    station: import('#server/auth/stations.ts').KnownStation | undefined;
  }
}
