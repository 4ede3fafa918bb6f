import type { Highs } from 'highs';
import load from 'highs';

export interface HighsAnswer {
  /** False when it ran out of its time. */
  finished: boolean;
  feasible: boolean;
  objective: number;
  /** Of `solve` alone. */
  ms: number;
  columns: Readonly<Record<string, number>>;
}

/** Its memory grows with each question: a fresh one after so many. */
const MOST_QUESTIONS = 20;
let highs: Highs | undefined;
let asked = 0;

/** Solves a program in CPLEX's LP text with HiGHS (WebAssembly), gap 10⁻⁹. @throws when it does not run */
export async function askHighs(program: string, seconds: number): Promise<HighsAnswer> {
  if (highs === undefined || asked++ >= MOST_QUESTIONS) {
    highs = await load();
    asked = 1;
  }
  const started = performance.now();
  const found = highs.solve(program, { time_limit: seconds, mip_rel_gap: 1e-9, mip_abs_gap: 1e-6 });
  const ms = performance.now() - started;
  const columns = Object.entries(found.Columns).map(
    ([name, column]) => [name, 'Primal' in column ? column.Primal : 0] as const,
  );
  return {
    finished: found.Status === 'Optimal' || found.Status === 'Infeasible',
    feasible: found.Status !== 'Infeasible',
    objective: found.ObjectiveValue,
    ms,
    columns: Object.fromEntries(columns),
  };
}
