import { buildWhenStale } from '#scripts/build-when-stale.mjs';
import { requireProxyPrograms } from '#scripts/proxy-programs.mjs';

/** The programs and the built server; each file starts its own processes of them. */
export default async function setup() {
  requireProxyPrograms();
  await buildWhenStale();
}
