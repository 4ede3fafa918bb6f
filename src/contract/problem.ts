import * as z from 'zod/mini';

/** RFC 9457 problem details; `detail` is a sentence for the person at the screen. */
export const problem = z.object({
  type: z.string(),
  title: z.string(),
  status: z.int(),
  detail: z.string(),
  code: z.string(),
});
export type Problem = z.infer<typeof problem>;

/** The code of a refused entry that somebody corrected or dropped already: its station lets it go. */
export const SETTLED = 'settled-already';

/** Builds a problem document; `code` is stable, `detail` says what is wrong and what to do. */
export function makeProblem(status: number, code: string, title: string, detail: string): Problem {
  return { type: `/problems/${code}`, title, status, detail, code };
}
