import { expect, test } from 'vitest';
import { roundToSum } from '#domain/round-to-sum.ts';

test('largest remainder: 120 seats by the census of 1790', () => {
  // COMAP, chapter on apportionment, example 6 (read); Balinski & Young, "Fair Representation" (from memory).
  const population = {
    VA: 630_560,
    MA: 475_327,
    PA: 432_879,
    NC: 353_523,
    NY: 331_589,
    MD: 278_514,
    CT: 236_841,
    SC: 206_236,
    NJ: 179_570,
    NH: 141_822,
    VT: 85_533,
    GA: 70_835,
    KY: 68_705,
    RI: 68_446,
    DE: 55_540,
  };
  const people = Object.values(population).map(BigInt);
  const total = people.reduce((a, b) => a + b, 0n);
  const seats = roundToSum(people, total, 120);
  expect(Object.keys(population).map((state, n) => `${state}${seats[n]}`)).toEqual(
    'VA21 MA16 PA14 NC12 NY11 MD9 CT8 SC7 NJ6 NH5 VT3 GA2 KY2 RI2 DE2'.split(' '),
  );
});
