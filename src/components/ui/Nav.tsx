import { PailMark } from './PailMark.tsx';
import { useStation } from './station-context.ts';

const AREAS = [
  { area: 'bench', href: '/', name: 'Bench' },
  { area: 'shelf', href: '/shelf', name: 'Shelf' },
  { area: 'formulas', href: '/formulas', name: 'Formulas' },
  { area: 'shift', href: '/shift', name: 'Shift' },
] as const;
export type Area = (typeof AREAS)[number]['area'];

/** Tabs below on a phone, a rail at the left from tablet up. */
export function Nav({ area }: { area: Area }) {
  const { station } = useStation();
  return (
    <nav className="nav" aria-label="Areas">
      <span className="mark">
        <PailMark />
        Halfpail
      </span>
      {AREAS.map((entry) => (
        <a key={entry.area} href={entry.href} aria-current={entry.area === area ? 'page' : undefined}>
          {entry.name}
        </a>
      ))}
      <a className="me" href="/shift#person">
        <b>{station.person.displayName}</b>
        <span className="ink2">{station.station.name}</span>
      </a>
    </nav>
  );
}
