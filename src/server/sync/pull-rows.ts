import { type RawBuilder, sql } from 'kysely';
import type { TableName } from '#contract/rows.ts';

/**
 * Each table's row as stations hold it, children included; `t` is the table. Key order does not matter, names and units
 * are the contract's.
 */
export const pullTables: Readonly<Record<TableName, { table: string; row: RawBuilder<unknown> }>> = {
  shop: {
    table: 'shops',
    row: sql`json_build_object('name', t.name, 'locale', t.locale, 'timeZone', t.time_zone, 'settings', t.settings)`,
  },
  people: {
    table: 'people',
    row: sql`json_build_object('displayName', t.display_name, 'role', t.role, 'disabled', t.disabled_at is not null)`,
  },
  scales: {
    table: 'scales',
    row: sql`json_build_object('stationId', t.station_id, 'name', t.name, 'readabilityMg', t.readability_mg,
      'repeatabilityMg', t.repeatability_mg, 'minimumMg', t.minimum_mg, 'maximumMg', t.maximum_mg)`,
  },
  containers: {
    table: 'containers',
    row: sql`json_build_object('name', t.name, 'capacityMl', t.capacity_ml, 'tareMg', t.tare_mg, 'wallLossMg', t.wall_loss_mg)`,
  },
  locations: { table: 'locations', row: sql`json_build_object('code', t.code)` },
  families: {
    table: 'families',
    row: sql`json_build_object('name', t.name, 'returnsAllowed', t.returns_allowed, 'potLifeMin', t.pot_life_min)`,
  },
  familyRules: {
    table: 'family_rules',
    row: sql`json_build_object('intoId', t.into_id, 'fromId', t.from_id, 'verdict', t.verdict, 'reason', t.reason)`,
  },
  components: {
    table: 'components',
    row: sql`json_build_object('code', t.code, 'name', t.name, 'kind', t.kind, 'familyId', t.family_id,
      'densityGPerCm3', t.density, 'strong', t.strong, 'tolerancePpb', t.tolerance_ppb,
      'foreignLimitPpb', t.foreign_limit_ppb, 'cureC', t.cure_c, 'hazards', t.hazards, 'restrictions', t.restrictions,
      'lab', t.lab, 'hiding', t.hiding)`,
  },
  lots: {
    table: 'lots',
    row: sql`json_build_object('componentId', t.component_id, 'code', t.code, 'strengthPpm', t.strength_ppm,
      'useBy', t.use_by, 'balanceMg', t.balance_mg)`,
  },
  formulas: {
    table: 'formulas',
    row: sql`json_build_object('code', t.code, 'name', t.name, 'revisions', (
      select coalesce(json_agg(json_build_object('revision', r.revision, 'state', r.state, 'familyId', r.family_id,
        'lab', r.lab, 'hiding', r.hiding, 'baseRevision', r.base_revision, 'proposedBy', r.proposed_by, 'name', r.name,
        'note', r.note, 'parts', (
          select coalesce(json_agg(json_build_object('componentId', p.component_id, 'parts', p.parts::text) order by p.position), '[]')
          from formula_parts p
          where p.shop_id = r.shop_id and p.formula_id = r.formula_id and p.revision = r.revision))
        order by (r.state = 'approved') desc, r.revision desc), '[]')
      from formula_revisions r where r.shop_id = t.shop_id and r.formula_id = t.id))`,
  },
  jobs: {
    table: 'jobs',
    row: sql`json_build_object('number', t.number, 'customer', t.customer, 'due', t.due, 'garment', t.garment,
      'maxCureC', t.max_cure_c, 'compliance', t.compliance, 'colours', (
        select coalesce(json_agg(json_build_object('n', c.n, 'formulaId', c.formula_id, 'prints', c.prints,
          'needLowMg', c.need_low_mg, 'needMg', c.need_mg, 'needHighMg', c.need_high_mg) order by c.n), '[]')
        from job_colours c where c.shop_id = t.shop_id and c.job_id = t.id))`,
  },
  batches: {
    table: 'batches',
    row: sql`json_build_object('formulaId', t.formula_id, 'revision', t.revision, 'plannedMg', t.planned_mg,
      'actualMg', t.actual_mg, 'reusedMg', t.reused_mg, 'state', t.state, 'light', t.light, 'releasedBy', t.released_by,
      'mixedBy', t.mixed_by, 'mixedAt', t.mixed_at, 'jobId', t.job_id, 'rush', t.rush)`,
  },
  buckets: {
    table: 'buckets',
    row: sql`json_build_object('code', t.code, 'name', t.name, 'formulaId', t.formula_id, 'revision', t.revision,
      'batchId', t.batch_id, 'familyId', t.family_id, 'containerId', t.container_id, 'tareMg', t.tare_mg,
      'filledMg', t.filled_mg, 'filledAt', t.filled_at, 'filledBy', t.filled_by, 'locationId', t.location_id,
      'state', t.state, 'grade', t.grade, 'released', t.released, 'balanceMg', t.balance_mg,
      'needsRecount', t.needs_recount, 'seen', t.seen, 'trace', t.trace, 'useBy', t.use_by, 'cureC', t.cure_c,
      'restrictions', t.restrictions, 'hazards', t.hazards, 'generation', t.generation,
      'reservedFor', t.reserved_for, 'jobId', t.job_id, 'lab', t.lab, 'hiding', t.hiding,
        'composition', (
          select coalesce(json_agg(json_build_object('componentId', s.component_id, 'ppb', s.ppb) order by s.ppb desc, s.component_id), '[]')
          from bucket_composition s where s.shop_id = t.shop_id and s.bucket_id = t.id),
        'parents', (
          select coalesce(json_agg(json_build_object('bucketId', p.parent_id, 'massMg', p.mass_mg) order by p.parent_id), '[]')
          from bucket_parents p where p.shop_id = t.shop_id and p.child_id = t.id))`,
  },
};
