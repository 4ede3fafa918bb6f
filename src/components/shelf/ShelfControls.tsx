import type { ShelfQuery, ShelfSort } from './list-shelf.ts';
import type { ShopFacts } from './use-shop-facts.ts';

interface Props {
  query: ShelfQuery;
  onChange: (change: Partial<ShelfQuery>) => void;
  facts: ShopFacts;
}

const SORTS: readonly { value: ShelfSort; name: string }[] = [
  { value: 'oldest', name: 'Oldest first' },
  { value: 'heaviest', name: 'Heaviest first' },
  { value: 'place', name: 'By place' },
];

/** Search, family, order; a batch's own tubs can be left for the whole shelf. */
export function ShelfControls({ query, onChange, facts }: Props) {
  const held = new Set(facts.shelf.map((tub) => tub.familyId));
  const families = [...facts.families.values()]
    .filter((family) => held.has(family.id))
    .sort((a, b) => a.name.localeCompare(b.name));
  return (
    <search className="shelf-controls">
      <label className="field">
        <span>Code, name or component</span>
        <input
          type="search"
          value={query.text}
          autoComplete="off"
          onChange={(event) => onChange({ text: event.target.value })}
        />
      </label>
      <select
        className="box"
        aria-label="Family"
        value={query.familyId}
        onChange={(event) => onChange({ familyId: event.target.value })}
      >
        <option value="">All families</option>
        {families.map((family) => (
          <option key={family.id} value={family.id}>
            {family.name}
          </option>
        ))}
      </select>
      <select
        className="box"
        aria-label="Order"
        value={query.sort}
        onChange={(event) => onChange({ sort: event.target.value as ShelfSort })}
      >
        {SORTS.map((sort) => (
          <option key={sort.value} value={sort.value}>
            {sort.name}
          </option>
        ))}
      </select>
      {query.batchId === null ? null : (
        <button type="button" className="key" onClick={() => onChange({ batchId: null })}>
          Show the whole shelf
        </button>
      )}
    </search>
  );
}
