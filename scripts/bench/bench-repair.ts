import { repairOvershoot } from '#domain/repair-overshoot.ts';
import { type HighsAnswer, askHighs } from './ask-highs.ts';
import { median } from './quantile.ts';
import { makeRepairs } from './repair-cases.ts';
import { repairLp } from './repair-lp.ts';
import { sayTimes, sayWhether, timeOf } from './say-target.ts';

const CASES = 300;
const WARM_UPS = 20;

/** C: one repair, then the linear program of the same pot in HiGHS. */
export async function benchRepair(): Promise<void> {
  const cases = makeRepairs(21, CASES);
  for (let turn = 0; turn < WARM_UPS; turn++) for (const input of cases) repairOvershoot(input);
  const own = cases.map((input) => {
    const batch = repairOvershoot(input).choices[0]?.batch ?? Number.NaN;
    return { ms: timeOf(() => repairOvershoot(input)), batch };
  });
  const highs: number[] = [];
  let equal = 0;
  for (const [n, input] of cases.entries()) {
    const program = repairLp(input);
    const turns = [await askHighs(program, 10), await askHighs(program, 10), await askHighs(program, 10)];
    highs.push(Math.min(...turns.map(({ ms }) => ms)));
    const [answer] = turns as [HighsAnswer];
    const above = (own[n]?.batch ?? Number.NaN) - answer.objective * 1000;
    // Rounded up to the next step; HiGHS is within 10⁻⁶ of its rows.
    if (answer.feasible && above > -1 && above < input.readability + 1) equal++;
  }
  const times = own.map(({ ms }) => ms);
  sayTimes('C, one repair', times, 1);
  const ratio = median(highs) / median(times);
  sayWhether(
    `C, HiGHS (WebAssembly, its linear program) takes ${ratio.toFixed(0)} times as long, median (at least 50)`,
    ratio >= 50,
  );
  sayWhether(`C, least batch equal to HiGHS's, to the step, on ${equal} of ${CASES}`, equal === CASES);
}
