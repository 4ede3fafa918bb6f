import { useMemo, useState } from 'react';
import { Keypad } from '#components/ui/Keypad.tsx';
import { Strip } from '#components/ui/Strip.tsx';
import { SyncChip } from '#components/ui/SyncChip.tsx';
import { Top } from '#components/ui/Top.tsx';
import { typeDigit } from '#components/ui/typed-digits.ts';
import { AmountField } from './AmountField.tsx';
import { DoNotMix } from './DoNotMix.tsx';
import { FoldIn } from './FoldIn.tsx';
import { ScalePicker } from './ScalePicker.tsx';
import { TooSmall } from './TooSmall.tsx';
import { WeighInKey } from './WeighInKey.tsx';
import { type MixFacts, useMixFacts } from './use-mix-facts.ts';
import { useShelfFacts } from './use-shelf-facts.ts';
import { useSuggestions } from './use-suggestions.ts';
import { readAmount } from './read-amount.ts';
import { tolerancesFor } from '#components/ui/tolerances.ts';

interface Props {
  formulaId: string;
  jobId: string | null;
  /** Which of the job's colours, from 1. */
  colour: number;
  useBucketId: string | null;
}

/** How much, on which scale, and which leftovers first. */
export function HowMuch(props: Props) {
  const facts = useMixFacts(props.formulaId, props.jobId);
  if (facts === undefined) return null;
  if (facts === null) {
    return (
      <>
        <Top title="How much" back={{ href: '/mix', label: 'Back to the formulas' }} />
        <p>No such formula on this device. Choose another.</p>
      </>
    );
  }
  return <Sized facts={facts} {...props} />;
}

function Sized({ facts, colour, useBucketId }: Props & { facts: MixFacts }) {
  const need = facts.job?.colours.find((entry) => entry.n === colour);
  const [text, setText] = useState(need === undefined ? '' : String(Math.ceil(need.needMg / 1000)));
  const [scaleId, setScaleId] = useState<string>();
  const [refused, setRefused] = useState<ReadonlySet<string>>(new Set());
  const [chosen, setChosen] = useState(0);
  const amount = useMemo(() => readAmount(text, facts.scales, scaleId), [text, facts.scales, scaleId]);
  const tolerance = useMemo(() => tolerancesFor(facts.target, facts.components), [facts]);
  const shelf = useShelfFacts(facts, amount, refused, useBucketId);
  const state = useSuggestions(shelf, tolerance);
  return (
    <>
      <Top title="How much" back={{ href: '/mix', label: 'Back to the formulas' }}>
        <SyncChip />
      </Top>
      <div className="size-cols">
        <div className="stack left gap-3">
          <FormulaHead facts={facts} />
          <AmountField text={text} onText={setText} amount={amount} need={need} job={facts.job} />
          <Keypad className="desk-pad" onKey={(key) => setText(typeDigit(text, key))} />
          <ScalePicker scales={facts.scales} amount={amount} onScale={setScaleId} />
        </div>
        <div className="stack right gap-4">
          <TooSmall facts={facts} amount={amount} shelf={shelf} />
          <DoNotMix facts={facts} />
          <FoldIn
            facts={facts}
            state={state}
            chosen={chosen}
            onChoose={setChosen}
            onRefuse={(ids) => {
              setRefused(new Set([...refused, ...ids]));
              setChosen(0);
            }}
          />
        </div>
        <div className="dock">
          <WeighInKey facts={facts} amount={amount} state={state} chosen={chosen} />
        </div>
      </div>
    </>
  );
}

function FormulaHead({ facts }: { facts: MixFacts }) {
  const { formula, revision } = facts;
  return (
    <div className="formula">
      <Strip lab={revision.lab} hiding={revision.hiding} />
      <div>
        <b className="text-24">{formula.name}</b>
        <br />
        <span className="ink2">
          {formula.code} r{revision.revision}, {facts.families.get(revision.familyId)?.name}
        </span>
        {revision.state === 'approved' ? null : <span className="badge warn g-warn">Not approved</span>}
      </div>
    </div>
  );
}
