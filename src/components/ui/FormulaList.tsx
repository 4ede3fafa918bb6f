import { useDeferredValue, useState } from 'react';
import type { Row } from '#contract/rows.ts';
import { Strip } from './Strip.tsx';
import { useFormulaSearch } from './use-formula-search.ts';
import { useRows } from './use-rows.ts';

const PAGE = 40;

/** Search box and rows; each row leads where `hrefOf` says. */
export function FormulaList({ hrefOf, current }: { hrefOf: (formula: Row<'formulas'>) => string; current?: string }) {
  const [query, setQuery] = useState('');
  const [shown, setShown] = useState(PAGE);
  const found = useFormulaSearch(useDeferredValue(query));
  const families = useRows('families');
  return (
    <section className="stack" aria-label="Formulas">
      <label className="field">
        <span>Code, name or component</span>
        <input
          type="search"
          value={query}
          autoComplete="off"
          onChange={(event) => {
            setQuery(event.target.value);
            setShown(PAGE);
          }}
        />
      </label>
      <p className="ink2" aria-live="polite">
        {found === undefined ? '' : `${found.length} formulas`}
      </p>
      {found?.length === 0 ? <p>Nothing fits. Type part of a name.</p> : null}
      {found?.slice(0, shown).map((formula) => {
        const revision = formula.revisions[0];
        return (
          <a
            key={formula.id}
            className="row"
            href={hrefOf(formula)}
            aria-current={formula.id === current ? 'true' : undefined}
          >
            <Strip lab={revision?.lab ?? null} hiding={revision?.hiding ?? 0} />
            <div>
              <b>{formula.name}</b>
              <small className="ink2">
                {formula.code}
                {revision ? ` r${revision.revision} · ${families?.get(revision.familyId)?.name ?? ''}` : ''}
              </small>
            </div>
            {revision?.state === 'draft' ? <span className="badge g-ask">Draft</span> : null}
          </a>
        );
      })}
      {found !== undefined && found.length > shown ? (
        <button type="button" className="key" onClick={() => setShown(shown + PAGE)}>
          Show {Math.min(PAGE, found.length - shown)} more
        </button>
      ) : null}
    </section>
  );
}
