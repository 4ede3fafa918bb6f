import type { TestProject } from 'vitest/node';
import { openTestCluster } from './postgres.ts';

declare module 'vitest' {
  interface ProvidedContext {
    ownerUrl: string;
    appUrl: string;
    clusterUrl: string;
    template: string;
  }
}

/** A migrated, empty database for one run of the server tests. */
export default async function setup(project: TestProject) {
  const cluster = await openTestCluster();
  const { ownerUrl, appUrl } = await cluster.makeDatabase();
  project.provide('ownerUrl', ownerUrl);
  project.provide('appUrl', appUrl);
  project.provide('clusterUrl', cluster.clusterUrl);
  project.provide('template', cluster.template);
  return cluster.close;
}
