import type { Milligrams } from '#domain/mass.ts';
import { formatGrams } from '#domain/format-mass.ts';
import { useStation } from './station-context.ts';

/** Grams with the scale's decimals; the unit is lighter than the number. */
export function Mass({ mg, step = 100 }: { mg: number; step?: number }) {
  const { station } = useStation();
  return (
    <>
      {formatGrams(mg as Milligrams, step as Milligrams, station.shop.locale)} <u>g</u>
    </>
  );
}
