import { Strip } from '#components/ui/Strip.tsx';
import { useFormulas } from '#components/ui/use-formulas.ts';
import { useRows } from '#components/ui/use-rows.ts';
import { useStation } from '#components/ui/station-context.ts';
import type { Row } from '#contract/rows.ts';
import { mayRecord } from '#contract/roles.ts';
import { compositionFromParts } from '#domain/composition.ts';

/** One formula to read: its newest revision's parts and shares, and the way to the scale. */
export function FormulaCard({ formulaId }: { formulaId: string }) {
  const { station } = useStation();
  const formulas = useFormulas();
  const components = useRows('components');
  const families = useRows('families');
  if (formulas === undefined || components === undefined || families === undefined) return null;
  const formula = formulas.get(formulaId);
  const revision = formula?.revisions[0];
  if (formula === undefined || revision === undefined) return <p>No such formula on this device.</p>;
  return (
    <article className="card stack tablet:sticky tablet:top-4 gap-4">
      <Strip lab={revision.lab} hiding={revision.hiding} size="l" />
      <div>
        <h2>{formula.name}</h2>
        <span className="ink2">
          {formula.code} r{revision.revision} · {families.get(revision.familyId)?.name}
        </span>
      </div>
      {revision.state === 'approved' ? (
        <span className="badge g-ok">Approved</span>
      ) : (
        <span className="badge warn g-warn justify-self-start">Not approved</span>
      )}
      <PartsTable parts={revision.parts} components={components} />
      <p className="small ink2">The Strip is a preview, not a match.</p>
      {mayRecord(station.person.role, 'batch-mixed') ? (
        <a className="key go wide" href={`/mix?formula=${formula.id}`}>
          Mix
        </a>
      ) : null}
    </article>
  );
}

type Parts = Row<'formulas'>['revisions'][number]['parts'];

function PartsTable({ parts, components }: { parts: Parts; components: ReadonlyMap<string, Row<'components'>> }) {
  const shares = compositionFromParts(parts);
  return (
    <table className="table">
      <thead>
        <tr>
          <th>Component</th>
          <th className="r">parts</th>
          <th className="r">share</th>
        </tr>
      </thead>
      <tbody>
        {parts.map((part) => (
          <tr key={part.componentId}>
            <td>{components.get(part.componentId)?.name ?? 'Not on this device'}</td>
            <td className="r">{part.parts}</td>
            <td className="r">
              <b className="num">
                {((shares.get(part.componentId) ?? 0) / 1e7).toFixed(2)} <u>%</u>
              </b>
            </td>
          </tr>
        ))}
      </tbody>
    </table>
  );
}
