import { Mass } from '#components/ui/Mass.tsx';
import { useStation } from '#components/ui/station-context.ts';
import type { Row } from '#contract/rows.ts';
import { formatBucketCode } from '#domain/bucket-code.ts';
import { TubCare } from './TubFacts.tsx';
import { largestShares } from './describe-bucket.ts';
import type { ShopFacts } from './use-shop-facts.ts';

const MOST = 6;
const PPB_A_PERCENT = 1e7;

/** What is in it, largest first, the leftovers that went into it, and what to mind. */
export function TubContent({ tub, facts }: { tub: Row<'buckets'>; facts: ShopFacts }) {
  return (
    <div className="stack gap-6">
      <Shares tub={tub} facts={facts} />
      <Parents tub={tub} facts={facts} />
      <TubCare tub={tub} />
    </div>
  );
}

function Shares({ tub, facts }: { tub: Row<'buckets'>; facts: ShopFacts }) {
  const { locale } = useStation().station.shop;
  const percent = new Intl.NumberFormat(locale, { minimumFractionDigits: 2, maximumFractionDigits: 2 });
  const { shares, others } = largestShares(tub, MOST);
  return (
    <section className="stack">
      <h2>What is in it</h2>
      {tub.grade === 'assumed' ? <p className="badge g-ask">Assumed, not weighed.</p> : null}
      {shares.length === 0 ? <p>Unknown. Never folded in by recipe.</p> : null}
      <dl className="sum">
        {shares.map((share) => (
          <div key={share.componentId} className="contents">
            <dt className="wrap-anywhere">{facts.components.get(share.componentId)?.name ?? 'Not on this device'}</dt>
            <dd className="num">
              {percent.format(share.ppb / PPB_A_PERCENT)} <u>%</u>
            </dd>
          </div>
        ))}
      </dl>
      {others > 0 ? <p className="ink2">{others} more, each smaller.</p> : null}
    </section>
  );
}

function Parents({ tub, facts }: { tub: Row<'buckets'>; facts: ShopFacts }) {
  if (tub.parents.length === 0) return null;
  return (
    <section className="stack">
      <h2>Leftovers used in it</h2>
      {tub.parents.map((parent) => {
        const source = facts.shelf.find((entry) => entry.id === parent.bucketId);
        const mass = (
          <span className="num">
            <Mass mg={parent.massMg} />
          </span>
        );
        if (source === undefined) {
          return (
            <div key={parent.bucketId} className="row">
              <div>Not on this device</div>
              {mass}
            </div>
          );
        }
        return (
          <a key={parent.bucketId} className="row" href={`/b/${source.code}`}>
            <div>
              <b>{formatBucketCode(source.code)}</b>
              <small className="ink2 wrap-anywhere">{source.name}</small>
            </div>
            {mass}
          </a>
        );
      })}
    </section>
  );
}
