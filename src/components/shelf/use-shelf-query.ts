import { useState } from 'react';
import type { ShelfQuery, ShelfSort } from './list-shelf.ts';

const SORTS: readonly string[] = ['oldest', 'heaviest', 'place'] satisfies ShelfSort[];

/** What the list is narrowed to, kept in the address so that coming back finds it again. */
export function useShelfQuery(): [ShelfQuery, (change: Partial<ShelfQuery>) => void] {
  const [query, setQuery] = useState(() => readQuery(new URLSearchParams(location.search)));
  return [
    query,
    (change) => {
      const next = { ...query, ...change };
      setQuery(next);
      const search = writeQuery(next).toString();
      history.replaceState(null, '', search === '' ? location.pathname : `?${search}`);
    },
  ];
}

function readQuery(search: URLSearchParams): ShelfQuery {
  const sort = search.get('sort') ?? '';
  return {
    text: search.get('find') ?? '',
    familyId: search.get('family') ?? '',
    sort: SORTS.includes(sort) ? (sort as ShelfSort) : 'oldest',
    batchId: search.get('batch'),
    gone: search.has('empty'),
  };
}

function writeQuery(query: ShelfQuery): URLSearchParams {
  const search = new URLSearchParams();
  if (query.text !== '') search.set('find', query.text);
  if (query.familyId !== '') search.set('family', query.familyId);
  if (query.sort !== 'oldest') search.set('sort', query.sort);
  if (query.batchId !== null) search.set('batch', query.batchId);
  if (query.gone) search.set('empty', '');
  return search;
}
