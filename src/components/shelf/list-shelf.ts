import type { Row } from '#contract/rows.ts';

type Tub = Row<'buckets'>;
export type ShelfSort = 'oldest' | 'heaviest' | 'place';

export interface ShelfQuery {
  text: string;
  familyId: string;
  sort: ShelfSort;
  /** Only the tubs of one batch. */
  batchId: string | null;
  /** Empty and discarded ones too. */
  gone: boolean;
}

export interface ShelfNames {
  components: ReadonlyMap<string, { name: string }>;
  locations: ReadonlyMap<string, { code: string }>;
}

export interface ShelfSection {
  title: string;
  tubs: readonly Tub[];
}

const SECTIONS: readonly { title: string; states: readonly Tub['state'][] }[] = [
  { title: 'On the shelf', states: ['shelf'] },
  { title: 'At press', states: ['at-press'] },
  { title: 'Quarantine', states: ['quarantine'] },
  { title: 'Empty or discarded', states: ['empty', 'discarded'] },
];

/** The tubs that fit, by where they are; `gone`: how many empty and discarded ones fit besides. */
export function listShelf(
  shelf: readonly Tub[],
  query: ShelfQuery,
  names: ShelfNames,
): { sections: readonly ShelfSection[]; shown: number; gone: number } {
  const words = query.text.toLowerCase().split(/\s+/).filter(Boolean);
  const fitting = shelf
    .filter((tub) => query.familyId === '' || tub.familyId === query.familyId)
    .filter((tub) => query.batchId === null || tub.batchId === query.batchId)
    .filter((tub) => fitsText(tub, words, names))
    .sort(bySort(query.sort, names));
  const sections = SECTIONS.map(({ title, states }) => ({
    title,
    tubs: fitting.filter((tub) => states.includes(tub.state)),
  }));
  const gone = sections.at(-1)?.tubs.length ?? 0;
  const shown = (query.gone ? sections : sections.slice(0, -1)).filter((section) => section.tubs.length > 0);
  return { sections: shown, shown: fitting.length - (query.gone ? 0 : gone), gone };
}

function fitsText(tub: Tub, words: readonly string[], names: ShelfNames): boolean {
  if (words.length === 0) return true;
  const components = tub.composition.map((share) => names.components.get(share.componentId)?.name ?? '');
  const text = [tub.name, ...components].join(' ').toLowerCase();
  const code = tub.code.toLowerCase();
  return words.every((word) => text.includes(word) || code.includes(word.replace(/[-–]/g, '')));
}

function bySort(sort: ShelfSort, { locations }: ShelfNames): (a: Tub, b: Tub) => number {
  const byAge = (a: Tub, b: Tub) => a.filledAt.localeCompare(b.filledAt);
  if (sort === 'oldest') return byAge;
  if (sort === 'heaviest') return (a, b) => b.balanceMg - a.balanceMg || byAge(a, b);
  const place = (tub: Tub) => (tub.locationId === null ? undefined : locations.get(tub.locationId)?.code);
  return (a, b) => comparePlaces(place(a), place(b)) || byAge(a, b);
}

/** B4 before B10; tubs without a place last. */
function comparePlaces(a: string | undefined, b: string | undefined): number {
  if (a === undefined || b === undefined) return Number(a === undefined) - Number(b === undefined);
  return a.localeCompare(b, 'en', { numeric: true });
}
