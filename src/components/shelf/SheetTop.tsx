import { Top } from '#components/ui/Top.tsx';
import type { Row } from '#contract/rows.ts';
import { formatBucketCode } from '#domain/bucket-code.ts';

/** The head of an act: what is done, with which tub, and the way back without an entry. */
export function SheetTop({ title, tub, onClose }: { title: string; tub: Row<'buckets'>; onClose: () => void }) {
  return (
    <Top
      title={title}
      sub={`${formatBucketCode(tub.code)} · ${tub.name}`}
      back={{ href: `/b/${tub.code}`, label: 'Back to the tub', onGo: onClose }}
    />
  );
}
