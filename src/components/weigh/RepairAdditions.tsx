import { useStation } from '#components/ui/station-context.ts';
import { formatGrams } from '#domain/format-mass.ts';
import type { Milligrams } from '#domain/mass.ts';
import type { WeighFacts } from './use-weigh-facts.ts';

interface Props {
  facts: WeighFacts;
  additions: ReadonlyMap<string, Milligrams>;
}

/** What growing the batch asks for, component by component; on a phone the steps themselves show it. */
export function RepairAdditions({ facts, additions }: Props) {
  const { station } = useStation();
  const grams = (mg: number) =>
    formatGrams(mg as Milligrams, facts.scale.readabilityMg as Milligrams, station.shop.locale);
  return (
    <section className="adds">
      <h2>Grow the batch: still to add</h2>
      <table className="table">
        <tbody>
          {[...additions]
            .filter(([, mg]) => mg > 0)
            .map(([id, mg]) => (
              <tr key={id}>
                <td>{facts.components.get(id)?.name}</td>
                <td className="r num">
                  {grams(mg)} <u>g</u>
                </td>
              </tr>
            ))}
        </tbody>
      </table>
    </section>
  );
}
