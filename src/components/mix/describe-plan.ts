import type { Row } from '#contract/rows.ts';
import type { FoldInPlan, FoldInProblem } from '#domain/fold-in.ts';
import { formatGrams } from '#domain/format-mass.ts';
import type { Milligrams } from '#domain/mass.ts';
import type { Suggestion } from './suggestions.ts';

/** "Use up Winter sky, save 186.4 g" */
export function planTitle(plan: FoldInPlan, buckets: ReadonlyMap<string, Row<'buckets'>>, locale: string): string {
  const names = plan.fromBuckets.map((from) => buckets.get(from.bucketId)?.name ?? '');
  const all = plan.fromBuckets.every((from) => from.empties);
  const grams = formatGrams(plan.reused, 100 as Milligrams, locale);
  return `${all ? 'Use up' : 'Use'} ${names.join(' and ')}, save ${grams} g`;
}

/** Short badges with their glyph: kind, what is emptied, how sure the figure is. */
export function planFacts(suggestion: Suggestion, locale: string): readonly { glyph: string; text: string }[] {
  const { plan, problem } = suggestion;
  const emptied = plan.fromBuckets.filter((from) => from.empties).length;
  const facts = [
    { glyph: 'g-ok', text: suggestion.kind === 'same-recipe' ? 'Same recipe' : deviationInWords(plan, problem) },
  ];
  if (emptied > 0) facts.push({ glyph: 'g-pail', text: emptied === 1 ? 'Tub emptied' : `${emptied} tubs emptied` });
  facts.push(sureness(plan, locale));
  return facts;
}

/** What the bound proves of the figure. */
function sureness(plan: FoldInPlan, locale: string): { glyph: string; text: string } {
  if (plan.status === 'best') return { glyph: 'g-ok', text: 'Best possible' };
  const more = formatGrams((plan.objectiveBound - plan.objective) as Milligrams, 1000 as Milligrams, locale);
  return { glyph: 'g-ask', text: `At most ${more} g more is possible` };
}

/** The worst component's deviation beside its own limit: "Off by 1.6 of 2 %". */
function deviationInWords(plan: FoldInPlan, problem: FoldInProblem): string {
  let worst = { used: 0, deviation: 0, limit: 0 };
  const masses = massesOf(plan, problem);
  for (const id of new Set([...masses.keys(), ...problem.target.keys()])) {
    const target = problem.target.get(id) ?? 0;
    const limit = problem.tolerance.get(id) ?? 0;
    // A scale step of rounding is allowed beside the tolerance, so it does not count against it.
    const rounding = (problem.readability / plan.batch) * 1e9;
    const deviation = Math.max(0, Math.abs(((masses.get(id) ?? 0) / plan.batch) * 1e9 - target) - rounding);
    const scale = target > 0 ? target : 1e9;
    if (limit > 0 && deviation / limit > worst.used) {
      worst = { used: deviation / limit, deviation: (deviation / scale) * 100, limit: (limit / scale) * 100 };
    }
  }
  if (worst.deviation < 0.05) return 'Same recipe';
  return `Off by ${worst.deviation.toFixed(1)} of ${worst.limit.toFixed(1)} %`;
}

function massesOf(plan: FoldInPlan, problem: FoldInProblem): Map<string, number> {
  const masses = new Map<string, number>(plan.fresh);
  for (const from of plan.fromBuckets) {
    const bucket = problem.buckets.find((entry) => entry.id === from.bucketId);
    for (const [id, share] of bucket?.composition ?? [])
      masses.set(id, (masses.get(id) ?? 0) + (from.mass * share) / 1e9);
  }
  return masses;
}
