import type { Row } from '#contract/rows.ts';
import type { Amount } from './read-amount.ts';

interface Props {
  text: string;
  onText: (text: string) => void;
  amount: Amount;
  job: Row<'jobs'> | undefined;
  need: Row<'jobs'>['colours'][number] | undefined;
}

/** The batch mass in grams, comma or point; the problem stands beside it and what was typed stays. */
export function AmountField({ text, onText, amount, job, need }: Props) {
  const problem = amount.state === 'problem' ? amount.problem : undefined;
  return (
    <div className="amount relative">
      <label className="field">
        <span>
          {job !== undefined && need !== undefined
            ? `${job.number} needs ${Math.round(need.needLowMg / 1000)} to ${Math.round(need.needHighMg / 1000)} g`
            : 'Batch mass in grams'}
        </span>
        <span className="relative block">
          <input
            inputMode="decimal"
            autoComplete="off"
            value={text}
            aria-invalid={problem !== undefined}
            aria-describedby="amount-problem"
            onChange={(event) => onText(event.target.value)}
          />
          <span className="unit" aria-hidden="true">
            g
          </span>
        </span>
      </label>
      <p
        id="amount-problem"
        role="alert"
        className={problem === undefined ? '' : 'badge warn g-warn mt-2 whitespace-normal'}
      >
        {problem}
      </p>
    </div>
  );
}
