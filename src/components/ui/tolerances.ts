import type { Row } from '#contract/rows.ts';
import type { Composition } from '#domain/composition.ts';
import type { PartsPerBillion } from '#domain/mass.ts';

/** Defaults, as a part of the component's own share (ppb). Common practice, no source; a shop may change them. */
const LOOSE = 50_000_000;
const PIGMENT = 20_000_000;
const STRONG_PIGMENT = 10_000_000;
const LOOSE_KINDS: readonly string[] = ['base', 'clear', 'additive'];

/**
 * τ for each component of the shop: a part of its share where the formula has it, its foreign limit (a part of the
 * batch) where not. Components without tolerance are left out, which means 0.
 */
export function tolerancesFor(
  target: Composition,
  components: ReadonlyMap<string, Row<'components'>>,
): ReadonlyMap<string, PartsPerBillion> {
  const tolerances = new Map<string, PartsPerBillion>();
  for (const component of components.values()) {
    const share = target.get(component.id);
    const limit =
      share === undefined ? component.foreignLimitPpb : Math.floor((share / 1e9) * relativeTolerance(component));
    if (limit > 0) tolerances.set(component.id, limit as PartsPerBillion);
  }
  return tolerances;
}

function relativeTolerance(component: Row<'components'>): number {
  if (component.tolerancePpb !== null) return component.tolerancePpb;
  if (LOOSE_KINDS.includes(component.kind)) return LOOSE;
  return component.strong ? STRONG_PIGMENT : PIGMENT;
}
