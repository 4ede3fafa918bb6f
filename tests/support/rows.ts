import { v7 as uuidv7 } from 'uuid';
import type { Row } from '#contract/rows.ts';

export function tubRow(given: Partial<Row<'buckets'>> = {}): Row<'buckets'> {
  return {
    id: uuidv7(),
    code: 'AC23467A',
    name: 'Winter sky',
    formulaId: null,
    revision: null,
    batchId: null,
    familyId: uuidv7(),
    containerId: uuidv7(),
    tareMg: 68_000,
    filledMg: 900_000,
    filledAt: '2026-11-20T08:00:00Z',
    filledBy: null,
    locationId: uuidv7(),
    state: 'shelf',
    grade: 'untouched',
    released: true,
    balanceMg: 500_000,
    needsRecount: false,
    seen: {},
    composition: [],
    useBy: null,
    cureC: null,
    restrictions: [],
    hazards: [],
    generation: 0,
    reservedFor: null,
    jobId: null,
    parents: [],
    lab: null,
    hiding: 60,
    ...given,
  };
}

export function componentRow(given: Partial<Row<'components'>> = {}): Row<'components'> {
  return {
    id: uuidv7(),
    code: 'B1',
    name: 'Mixing base',
    kind: 'base',
    familyId: uuidv7(),
    densityGPerCm3: 1.2,
    strong: false,
    tolerancePpb: null,
    foreignLimitPpb: 0,
    cureC: null,
    hazards: [],
    restrictions: [],
    lab: null,
    hiding: 10,
    ...given,
  };
}

export function formulaRow(given: Partial<Row<'formulas'>> = {}): Row<'formulas'> {
  return {
    id: uuidv7(),
    code: 'F-1',
    name: 'Harbour blue',
    revisions: [{ revision: 1, state: 'approved', familyId: uuidv7(), lab: null, hiding: 70, parts: [] }],
    ...given,
  };
}
