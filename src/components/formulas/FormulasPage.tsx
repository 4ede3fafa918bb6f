import { FormulaList } from '#components/ui/FormulaList.tsx';
import { StationRoot } from '#components/ui/StationRoot.tsx';
import { SyncChip } from '#components/ui/SyncChip.tsx';
import { Top } from '#components/ui/Top.tsx';
import { FormulaCard } from './FormulaCard.tsx';

export function FormulasPage() {
  const chosen = new URLSearchParams(location.search).get('formula') ?? undefined;
  return (
    <StationRoot area="formulas">
      <Top
        title="Formulas"
        back={chosen === undefined ? undefined : { href: '/formulas', label: 'Back to all formulas' }}
      >
        <SyncChip />
      </Top>
      <div className="tablet:grid-cols-2 grid items-start gap-8">
        <div className={chosen === undefined ? '' : 'tablet:block hidden'}>
          <FormulaList hrefOf={(formula) => `/formulas?formula=${formula.id}`} current={chosen} />
        </div>
        {chosen === undefined ? (
          <p className="text-ink2 tablet:block hidden">Choose a formula to see its parts.</p>
        ) : (
          <FormulaCard formulaId={chosen} />
        )}
      </div>
    </StationRoot>
  );
}
