import { useStation } from '#components/ui/station-context.ts';
import { formatGrams } from '#domain/format-mass.ts';
import type { Milligrams } from '#domain/mass.ts';
import type { StepEntry } from './use-step-entry.ts';

/** The one action of a step: neutral until on target; a tub that gave less than its books asks whether it is empty. */
export function LogKey({ entry, step, onOver }: { entry: StepEntry; step: Milligrams; onOver: () => void }) {
  const { station } = useStation();
  if (entry.mass === undefined) {
    return (
      <button type="button" className="key wide log-key" disabled>
        Type the reading
      </button>
    );
  }
  const log = `Log ${formatGrams(entry.mass, step, station.shop.locale)} g`;
  if (entry.asksEmptied && entry.over === undefined) {
    return (
      <div className="pair">
        <button
          type="button"
          className="key log-key flex-col"
          disabled={entry.logging}
          onClick={() => void entry.log(true)}
        >
          {log}
          <small>Tub is empty</small>
        </button>
        <button
          type="button"
          className="key log-key flex-col"
          disabled={entry.logging}
          onClick={() => void entry.log(false)}
        >
          {log}
          <small>Some is left</small>
        </button>
      </div>
    );
  }
  return (
    <button
      type="button"
      className={`key wide log-key ${entry.onTarget ? 'go' : ''}`}
      disabled={entry.logging}
      onClick={() => {
        if (entry.over === undefined) void entry.log();
        else onOver();
      }}
    >
      {entry.onTarget ? `${log}, next step` : log}
    </button>
  );
}
