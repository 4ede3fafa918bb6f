import { useEffect, useRef, useState } from 'react';
import { StationRoot } from '#components/ui/StationRoot.tsx';
import { useStation } from '#components/ui/station-context.ts';
import { type FoundTub, findTub } from '#components/ui/find-tub.ts';
import { formatBucketCode } from '#domain/bucket-code.ts';
import { ActSheet } from './ActSheet.tsx';
import { Tub } from './Tub.tsx';
import { UnknownTub } from './UnknownTub.tsx';
import { actsFor } from './bucket-acts.ts';
import { codeInPath } from './code-in-path.ts';
import { useAct } from './use-act.ts';
import { type ShopFacts, useShopFacts } from './use-shop-facts.ts';

/** One tub by the code in the address: what it is, and what can be done with it. */
export function BucketPage() {
  return (
    <StationRoot area="shelf" flow className="bucket">
      <TubByCode />
    </StationRoot>
  );
}

function TubByCode() {
  const facts = useShopFacts();
  if (facts === undefined) return null;
  const found = findTub(codeInPath(location.pathname), facts.shelf);
  return 'tub' in found ? <KnownTub tub={found.tub} facts={facts} /> : <UnknownTub wrong={found} />;
}

function KnownTub({ tub, facts }: { tub: Extract<FoundTub, { tub: unknown }>['tub']; facts: ShopFacts }) {
  const { station } = useStation();
  const { act, open, close } = useAct();
  const [note, setNote] = useState<string>();
  const left = useRef<string>(undefined);
  const acts = actsFor(tub, station.person.role);
  useEffect(() => {
    document.title = `Tub ${formatBucketCode(tub.code)} · Halfpail`;
  }, [tub.code]);
  const shown = act !== undefined && acts.includes(act) ? act : undefined;
  useEffect(() => {
    // Back from an act without an entry: the key that opened it has the focus again.
    if (shown === undefined && left.current !== undefined && note === undefined) {
      document.getElementById(`act-${left.current}`)?.focus();
    }
    left.current = shown;
  }, [shown, note]);
  if (shown !== undefined) {
    return (
      <ActSheet
        act={shown}
        tub={tub}
        facts={facts}
        onClose={close}
        onDone={(done) => {
          setNote(done);
          close();
        }}
      />
    );
  }
  return (
    <Tub
      tub={tub}
      facts={facts}
      acts={acts}
      note={note}
      onAct={(next) => {
        setNote(undefined);
        open(next);
      }}
    />
  );
}
