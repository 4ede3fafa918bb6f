import type { FinishEntry } from './use-finish.ts';
import type { WeighFacts } from './use-weigh-facts.ts';

const MOST = 4;

/** Into which container, its tare as weighed, and where it will stand. */
export function ContainerPicker({ finish, facts }: { finish: FinishEntry; facts: WeighFacts }) {
  const places = [...facts.locations.values()].sort((a, b) =>
    a.code.localeCompare(b.code, undefined, { numeric: true }),
  );
  return (
    <section className="stack gap-4">
      <fieldset className="stack">
        <legend className="text-24 pb-2 font-bold">Fill into</legend>
        <div className="grid gap-2" role="radiogroup" aria-label="Container">
          {finish.containers.slice(0, MOST).map((container) => (
            <button
              key={container.id}
              type="button"
              role="radio"
              aria-checked={container.id === finish.container?.id}
              className="key justify-between"
              onClick={() => finish.chooseContainer(container.id)}
            >
              <span>{container.name}</span>
              <small>{Math.round((finish.volumeMl / container.capacityMl) * 100)} % full</small>
            </button>
          ))}
          {finish.containers.length === 0 ? <p>No container holds this much.</p> : null}
        </div>
      </fieldset>
      <label className="field">
        <span>Tare of the empty container in g, no lid</span>
        <input
          inputMode="decimal"
          autoComplete="off"
          value={finish.tareText}
          onChange={(event) => finish.setTareText(event.target.value)}
        />
      </label>
      <label className="field">
        <span>Place</span>
        <select
          className="box"
          value={finish.locationId ?? ''}
          onChange={(event) => finish.setLocationId(event.target.value === '' ? null : event.target.value)}
        >
          <option value="">Goes to the press</option>
          {places.map((place) => (
            <option key={place.id} value={place.id}>
              {place.code}
            </option>
          ))}
        </select>
      </label>
    </section>
  );
}
