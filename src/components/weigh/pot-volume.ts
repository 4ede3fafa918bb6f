import type { Addition } from '#contract/operation-bodies.ts';
import type { Row } from '#contract/rows.ts';
import type { Leftovers } from '#components/ui/weighing-step.ts';

/** Room left above the ink, so that it can be stirred. Common practice, no source. */
const FILL_LIMIT = 0.9;

/** The pot's volume in millilitres from the densities of what was put in; a leftover counts by its composition. */
export function potVolumeMl(
  additions: readonly Addition[],
  leftovers: Leftovers,
  components: ReadonlyMap<string, Row<'components'>>,
): number {
  let volume = 0;
  for (const addition of additions) {
    const shares =
      addition.kind === 'component'
        ? [{ componentId: addition.componentId, ppb: 1e9 }]
        : (leftovers[addition.bucketId] ?? []);
    for (const { componentId, ppb } of shares) {
      const density = components.get(componentId)?.densityGPerCm3;
      if (density === undefined) continue;
      volume += ((addition.actualMg / 1000) * (ppb / 1e9)) / density;
    }
  }
  return volume;
}

/** Containers that hold the volume with room to stir, smallest first. */
export function fittingContainers(containers: readonly Row<'containers'>[], volumeMl: number): Row<'containers'>[] {
  return containers
    .filter((container) => container.capacityMl * FILL_LIMIT >= volumeMl)
    .sort((a, b) => a.capacityMl - b.capacityMl);
}
