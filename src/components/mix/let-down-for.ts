import type { Milligrams } from '#domain/mass.ts';
import { type LetDown, type ScaleLimits, proposeLetDown } from '#domain/scale-weights.ts';
import { type ShelfFacts, chooseCandidates } from './fold-in-problem.ts';
import type { MixFacts } from './use-mix-facts.ts';

/** How a component that is too little for the scale can be let down in the formula's own base; undefined when it cannot. */
export function letDownFor(
  facts: MixFacts,
  shelf: ShelfFacts,
  scale: ScaleLimits,
  componentId: string,
): { letDown: LetDown; baseId: string } | undefined {
  const baseId = baseOf(facts, componentId);
  if (baseId === undefined) return undefined;
  const letDown = proposeLetDown({
    target: facts.target,
    batch: shelf.batch as Milligrams,
    scale,
    componentId,
    baseId,
    stocked: chooseCandidates(shelf).candidates.filter(({ composition }) =>
      isLetDown(composition, componentId, baseId),
    ),
  });
  return letDown && { letDown, baseId };
}

function isLetDown(composition: ReadonlyMap<string, number>, componentId: string, baseId: string): boolean {
  return composition.size === 2 && composition.has(componentId) && composition.has(baseId);
}

/** The base or clear base that the formula has most of. */
function baseOf(facts: MixFacts, componentId: string): string | undefined {
  const bases = [...facts.target].filter(([id]) => {
    const kind = facts.components.get(id)?.kind;
    return id !== componentId && (kind === 'base' || kind === 'clear');
  });
  return bases.sort(([, a], [, b]) => b - a)[0]?.[0];
}
