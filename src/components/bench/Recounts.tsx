import { Strip } from '#components/ui/Strip.tsx';
import { recountWords } from '#components/ui/recount-words.ts';
import { useRows } from '#components/ui/use-rows.ts';
import { useShelf } from '#components/ui/use-shelf.ts';
import { formatBucketCode } from '#domain/bucket-code.ts';

/** More than these wait on the Shelf. */
const MOST = 3;

/**
 * Tubs of which the books are in doubt: a task for whoever is near a scale; it goes when one of them is re-weighed. What
 * the books hold is not shown, so that nobody reads it off.
 */
export function Recounts() {
  const shelf = useShelf();
  const places = useRows('locations');
  const doubtful = shelf?.filter((tub) => tub.needsRecount) ?? [];
  if (doubtful.length === 0) return null;
  return (
    <section className="stack col-span-full" aria-label="Weigh again">
      <div className="head">
        <h2>Weigh again</h2>
        <span className="ink2">{doubtful.length}</span>
      </div>
      {doubtful
        .toSorted((a, b) => (a.code < b.code ? -1 : 1))
        .slice(0, MOST)
        .map((tub) => (
          <a key={tub.id} className="row" href={`/b/${tub.code}`}>
            <Strip lab={tub.lab} hiding={tub.hiding} />
            <div>
              <b className="nowrap">{formatBucketCode(tub.code)}</b>
              <small className="ink2 wrap-anywhere">
                {[tub.name, tub.locationId === null ? undefined : places?.get(tub.locationId)?.code]
                  .filter((piece) => piece !== undefined)
                  .join(' · ')}
              </small>
              <span className="badge g-warn whitespace-normal">{recountWords(tub)}</span>
            </div>
          </a>
        ))}
      {doubtful.length > MOST ? (
        <a className="row" href="/shelf">
          {doubtful.length - MOST} more on the Shelf
        </a>
      ) : null}
    </section>
  );
}
