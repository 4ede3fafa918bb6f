import MiniSearch from 'minisearch';
import { useMemo } from 'react';
import type { Row } from '#contract/rows.ts';
import { useFormulas } from './use-formulas.ts';
import { useRows } from './use-rows.ts';

/** Formulas by code, name or component, best first; all by name when nothing is typed; undefined while loading. */
export function useFormulaSearch(query: string): readonly Row<'formulas'>[] | undefined {
  const formulas = useFormulas();
  const components = useRows('components');
  const index = useMemo(() => {
    if (formulas === undefined || components === undefined) return undefined;
    return indexFormulas([...formulas.values()], components);
  }, [formulas, components]);
  return useMemo(() => {
    if (formulas === undefined || index === undefined) return undefined;
    if (query.trim() === '') return [...formulas.values()].sort((a, b) => a.name.localeCompare(b.name));
    return index.search(query).flatMap((hit) => formulas.get(hit.id as string) ?? []);
  }, [query, formulas, index]);
}

function indexFormulas(formulas: readonly Row<'formulas'>[], components: ReadonlyMap<string, Row<'components'>>) {
  const index = new MiniSearch<{ id: string; code: string; name: string; parts: string }>({
    fields: ['code', 'name', 'parts'],
    searchOptions: { prefix: true, fuzzy: 0.15, combineWith: 'AND', boost: { code: 3, name: 2 } },
  });
  index.addAll(
    formulas.map((formula) => ({
      id: formula.id,
      code: formula.code,
      name: formula.name,
      parts: (formula.revisions[0]?.parts ?? []).map((part) => components.get(part.componentId)?.name ?? '').join(' '),
    })),
  );
  return index;
}
