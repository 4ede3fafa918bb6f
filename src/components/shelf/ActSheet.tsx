import type { Row } from '#contract/rows.ts';
import { DiscardSheet } from './DiscardSheet.tsx';
import { IssueSheet } from './IssueSheet.tsx';
import { ReleaseSheet } from './ReleaseSheet.tsx';
import { ReturnSheet } from './ReturnSheet.tsx';
import { ReweighSheet } from './ReweighSheet.tsx';
import type { SheetAct } from './use-act.ts';
import type { ShopFacts } from './use-shop-facts.ts';

export interface SheetProps {
  tub: Row<'buckets'>;
  facts: ShopFacts;
  onClose: () => void;
  /** With the note to show once it is recorded. */
  onDone: (note: string) => void;
}

const SHEETS: Record<SheetAct, (props: SheetProps) => React.ReactNode> = {
  issue: IssueSheet,
  return: ReturnSheet,
  reweigh: ReweighSheet,
  release: ReleaseSheet,
  discard: DiscardSheet,
};

export function ActSheet({ act, ...props }: SheetProps & { act: SheetAct }) {
  const Sheet = SHEETS[act];
  return <Sheet {...props} />;
}
