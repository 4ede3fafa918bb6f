import type { Row } from '#contract/rows.ts';

interface Props {
  locations: ReadonlyMap<string, Row<'locations'>>;
  value: string | null;
  onChoose: (locationId: string | null) => void;
}

/** Where it will stand. */
export function PlaceField({ locations, value, onChoose }: Props) {
  const places = [...locations.values()].sort((a, b) => a.code.localeCompare(b.code, 'en', { numeric: true }));
  return (
    <label className="field beside">
      <span>Place</span>
      <select
        className="box"
        value={value ?? ''}
        onChange={(event) => onChoose(event.target.value === '' ? null : event.target.value)}
      >
        <option value="">No place yet</option>
        {places.map((place) => (
          <option key={place.id} value={place.id}>
            {place.code}
          </option>
        ))}
      </select>
    </label>
  );
}
