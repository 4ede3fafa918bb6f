import type { LeftOut } from './fold-in-problem.ts';

/** Why the other tubs stay on the shelf, one line each. */
export function LeftOutList({ leftOut }: { leftOut: readonly LeftOut[] }) {
  if (leftOut.length === 0) return null;
  return (
    <details className="bg-card">
      <summary className="row cursor-pointer">
        <div>
          <b>{leftOut.length === 1 ? '1 tub left out' : `${leftOut.length} tubs left out`}</b>
          <small className="ink2">Why each one</small>
        </div>
        <span className="g g-on" />
      </summary>
      <ul className="grid gap-2 px-3 pb-3">
        {leftOut.map(({ bucket, reason }) => (
          <li key={bucket.id}>
            <b>{bucket.name}</b> <span className="ink2">{reason}</span>
          </li>
        ))}
      </ul>
    </details>
  );
}
