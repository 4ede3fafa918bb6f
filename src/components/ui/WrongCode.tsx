import { useEffect, useRef } from 'react';
import type { Row } from '#contract/rows.ts';
import { formatBucketCode } from '#domain/bucket-code.ts';
import { Strip } from './Strip.tsx';

/** What is wrong with a code, and the one known tub that is a letter away. */
export function WrongCode({ problem, near }: { problem: string; near: Row<'buckets'> | undefined }) {
  const shown = useRef<HTMLDivElement>(null);
  // Below a camera picture it would stay out of sight.
  useEffect(() => shown.current?.scrollIntoView({ block: 'nearest' }), [problem, near]);
  return (
    <div ref={shown} className="stack" role="alert">
      <p className="badge warn g-warn justify-self-start whitespace-normal">{problem}</p>
      {near === undefined ? null : (
        <>
          <p>No such tub. {formatBucketCode(near.code)} is one letter away.</p>
          <a className="row" href={`/b/${near.code}`}>
            <Strip lab={near.lab} hiding={near.hiding} />
            <div>
              <b>Open {formatBucketCode(near.code)}</b>
              <small className="ink2 wrap-anywhere">{near.name}</small>
            </div>
            <span className="g g-on" />
          </a>
        </>
      )}
    </div>
  );
}
