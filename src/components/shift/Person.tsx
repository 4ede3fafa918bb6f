import { useState } from 'react';
import { chooseTheme, readTheme, type Theme } from '#components/ui/theme.ts';
import { useStation } from '#components/ui/station-context.ts';
import { signOut } from '#offline/station.ts';

/** Who is working here, the light or dark screen, and the way out; what waits stays on the device. */
export function Person({ waiting }: { waiting: number }) {
  const { station, sync } = useStation();
  const [theme, setTheme] = useState<Theme>(readTheme());
  const choose = (next: Theme) => {
    chooseTheme(next);
    setTheme(next);
  };
  return (
    <section className="stack" id="person" aria-label="Person">
      <h2>
        {station.person.displayName}, {station.person.role}
      </h2>
      <p className="ink2">
        {station.station.name} · {station.shop.name}
      </p>
      <div className="pair" role="radiogroup" aria-label="Screen">
        <button
          type="button"
          role="radio"
          aria-checked={theme === 'station'}
          className="key"
          onClick={() => choose('station')}
        >
          Dark screen
        </button>
        <button
          type="button"
          role="radio"
          aria-checked={theme === 'light'}
          className="key"
          onClick={() => choose('light')}
        >
          Light screen
        </button>
      </div>
      <button
        type="button"
        className="key wide"
        onClick={() => {
          sync.stop();
          void signOut(station).then(() => location.replace('/sign-in'));
        }}
      >
        Sign out
      </button>
      {waiting > 0 ? (
        <p className="ink2">The {waiting === 1 ? 'log' : `${waiting} logs`} that wait stay on this device.</p>
      ) : null}
    </section>
  );
}
