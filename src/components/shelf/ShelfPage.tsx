import { useDeferredValue, useMemo } from 'react';
import { StationRoot } from '#components/ui/StationRoot.tsx';
import { SyncChip } from '#components/ui/SyncChip.tsx';
import { Top } from '#components/ui/Top.tsx';
import { ShelfControls } from './ShelfControls.tsx';
import { ShelfRow } from './ShelfRow.tsx';
import { listShelf } from './list-shelf.ts';
import { useShelfQuery } from './use-shelf-query.ts';
import { type ShopFacts, useShopFacts } from './use-shop-facts.ts';

/** Every tub of the shop: leftovers on the shelf first. */
export function ShelfPage() {
  return (
    <StationRoot area="shelf" className="shelf">
      <Top title="Shelf">
        <a className="key" href="/scan" aria-label="Scan a tub">
          <span className="g g-scan" />
        </a>
        <SyncChip />
      </Top>
      <Shelf />
    </StationRoot>
  );
}

function Shelf() {
  const facts = useShopFacts();
  return facts === undefined ? null : <ShelfList facts={facts} />;
}

function ShelfList({ facts }: { facts: ShopFacts }) {
  const [query, change] = useShelfQuery();
  const searched = useDeferredValue(query);
  const { sections, shown, gone } = useMemo(() => listShelf(facts.shelf, searched, facts), [facts, searched]);
  const now = new Date();
  return (
    <>
      <ShelfControls query={query} onChange={change} facts={facts} />
      <p className="ink2" role="status">
        {shown === 1 ? '1 tub' : `${shown} tubs`}
        {searched.batchId === null ? '' : ' of this batch'}
      </p>
      {shown === 0 ? (
        <p>
          {facts.shelf.length === 0
            ? 'No tubs yet. Mix a batch to fill one.'
            : 'Nothing fits. Type less, or all families.'}
        </p>
      ) : null}
      {sections.map((section) => (
        <section key={section.title} className="stack" aria-label={section.title}>
          <h2>
            {section.title} <span className="ink2 font-normal">{section.tubs.length}</span>
          </h2>
          <div className="shelf-rows">
            {section.tubs.map((tub) => (
              <ShelfRow key={tub.id} tub={tub} facts={facts} now={now} />
            ))}
          </div>
        </section>
      ))}
      {gone > 0 ? (
        <button
          type="button"
          className="key wide"
          aria-pressed={query.gone}
          onClick={() => change({ gone: !query.gone })}
        >
          {query.gone ? 'Hide empty tubs' : `Show ${gone} empty or discarded`}
        </button>
      ) : null}
    </>
  );
}
