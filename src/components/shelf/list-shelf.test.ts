import { describe, expect, it } from 'vitest';
import type { Row } from '#contract/rows.ts';
import { type ShelfQuery, listShelf } from './list-shelf.ts';

const names = {
  components: new Map([['blue', { name: 'Bright blue concentrate' }]]),
  locations: new Map([
    ['b4', { code: 'B4' }],
    ['b10', { code: 'B10' }],
  ]),
};
const tub = (code: string, change: Partial<Row<'buckets'>> = {}) =>
  ({
    code,
    name: 'Winter sky',
    familyId: 'plastisol',
    batchId: null,
    state: 'shelf',
    locationId: null,
    balanceMg: 1000,
    filledAt: '2026-11-01T08:00:00Z',
    composition: [],
    ...change,
  }) as Row<'buckets'>;
const query: ShelfQuery = { text: '', familyId: '', sort: 'oldest', batchId: null, gone: false };
const codes = (shelf: readonly Row<'buckets'>[], change: Partial<ShelfQuery> = {}) =>
  listShelf(shelf, { ...query, ...change }, names).sections.flatMap((section) => section.tubs.map((one) => one.code));

describe('the shelf', () => {
  it('shows leftovers on the shelf first, then those at press, then quarantine', () => {
    const shelf = [tub('Q', { state: 'quarantine' }), tub('P', { state: 'at-press' }), tub('S')];
    expect(listShelf(shelf, query, names).sections.map((section) => section.title)).toEqual([
      'On the shelf',
      'At press',
      'Quarantine',
    ]);
  });
  it('keeps empty and discarded tubs back until asked, and counts them', () => {
    const shelf = [tub('S'), tub('E', { state: 'empty' }), tub('D', { state: 'discarded' })];
    expect(listShelf(shelf, query, names)).toMatchObject({ shown: 1, gone: 2 });
    expect(codes(shelf, { gone: true })).toEqual(['S', 'E', 'D']);
  });
  it('finds by code with or without its dash, by name and by component', () => {
    const shelf = [
      tub('MN7WYDF4', { name: 'Kiln red' }),
      tub('QR7WYDF4', { composition: [{ componentId: 'blue', ppb: 70_000_000 }] }),
    ];
    expect(codes(shelf, { text: 'mn7w-yd' })).toEqual(['MN7WYDF4']);
    expect(codes(shelf, { text: 'KILN' })).toEqual(['MN7WYDF4']);
    expect(codes(shelf, { text: 'blue winter' })).toEqual(['QR7WYDF4']);
    expect(codes(shelf, { text: 'blue kiln' })).toEqual([]);
  });
  it('sorts by age, by mass, and by place with B4 before B10 and no place last', () => {
    const shelf = [
      tub('none', { filledAt: '2026-11-01T08:00:00Z', balanceMg: 2 }),
      tub('ten', { locationId: 'b10', filledAt: '2026-11-02T08:00:00Z', balanceMg: 3 }),
      tub('four', { locationId: 'b4', filledAt: '2026-11-03T08:00:00Z', balanceMg: 1 }),
    ];
    expect(codes(shelf)).toEqual(['none', 'ten', 'four']);
    expect(codes(shelf, { sort: 'heaviest' })).toEqual(['ten', 'none', 'four']);
    expect(codes(shelf, { sort: 'place' })).toEqual(['four', 'ten', 'none']);
  });
  it('keeps to one family and to one batch', () => {
    const shelf = [tub('A', { familyId: 'silicone' }), tub('B', { batchId: 'today' })];
    expect(codes(shelf, { familyId: 'silicone' })).toEqual(['A']);
    expect(codes(shelf, { batchId: 'today' })).toEqual(['B']);
  });
});
