import { type Problem, makeProblem } from '#contract/problem.ts';

/** A refusal that the caller is told: status, a stable code, a sentence that says what to do. */
export class HttpProblem extends Error {
  override name = 'HttpProblem';
  readonly problem: Problem;
  readonly headers: Record<string, string>;

  constructor(status: number, code: string, title: string, detail: string, headers: Record<string, string> = {}) {
    super(detail);
    this.problem = makeProblem(status, code, title, detail);
    this.headers = headers;
  }
}

export function problemResponse(problem: Problem, headers: Record<string, string> = {}): Response {
  return new Response(JSON.stringify(problem), {
    status: problem.status,
    headers: { 'content-type': 'application/problem+json', ...headers },
  });
}
