import { describe, expect, it } from 'vitest';
import type { Row } from '#contract/rows.ts';
import { actsFor } from './bucket-acts.ts';

type Tub = Parameters<typeof actsFor>[0];
const tub = (change: Partial<Tub> = {}): Tub => ({
  state: 'shelf',
  released: true,
  needsRecount: false,
  batchId: 'a batch',
  grade: 'untouched',
  ...change,
});

describe('what may be done with a tub', () => {
  it('is used up first on the shelf, by those who mix', () => {
    expect(actsFor(tub(), 'mixer')).toEqual(['use-up', 'issue', 'return', 'reweigh', 'label', 'discard']);
    expect(actsFor(tub(), 'operator')).toEqual(['issue', 'return', 'reweigh', 'label']);
  });
  it('is returned first at a press, and not issued again', () => {
    expect(actsFor(tub({ state: 'at-press' }), 'operator')).toEqual(['return', 'reweigh', 'label']);
  });
  it('is weighed again first when two records disagree, and not used up before', () => {
    const acts = actsFor(tub({ needsRecount: true }), 'mixer');
    expect(acts[0]).toBe('reweigh');
    expect(acts).not.toContain('use-up');
  });
  it('is released first when nobody has, and issued unreleased only by those who may release', () => {
    expect(actsFor(tub({ released: false }), 'mixer').slice(0, 2)).toEqual(['release', 'issue']);
    expect(actsFor(tub({ released: false }), 'operator')).toEqual(['return', 'reweigh', 'label']);
  });
  it('is not used up while nobody knows what is in it', () => {
    expect(actsFor(tub({ grade: 'unknown' }), 'mixer')).not.toContain('use-up');
    expect(actsFor(tub({ grade: 'assumed' }), 'mixer')).toContain('use-up');
  });
  it('is neither used nor issued in quarantine', () => {
    expect(actsFor(tub({ state: 'quarantine' }), 'owner')).toEqual(['reweigh', 'label', 'discard']);
  });
  it('comes back to life only by a return when empty, and never when discarded', () => {
    expect(actsFor(tub({ state: 'empty' }), 'mixer')).toEqual(['return']);
    expect(actsFor(tub({ state: 'discarded' }), 'owner')).toEqual([]);
  });
  it('is weighed again, or discarded once more, when it is gone by one record and used by another', () => {
    const gone = tub({ state: 'discarded', needsRecount: true });
    expect(actsFor(gone, 'mixer')).toEqual(['reweigh', 'discard']);
    expect(actsFor(tub({ state: 'empty', needsRecount: true }), 'operator')).toEqual(['reweigh', 'return']);
  });
  it('lets a planner look and print, no more', () => {
    const states: Row<'buckets'>['state'][] = ['shelf', 'at-press', 'quarantine', 'empty'];
    expect(states.flatMap((state) => actsFor(tub({ state }), 'planner'))).toEqual(['label', 'label', 'label']);
  });
});
