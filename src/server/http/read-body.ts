import type * as z from 'zod/mini';
import { HttpProblem } from './http-problem.ts';

/**
 * Reads a JSON body of at most `limit` bytes by its schema.
 * @throws HttpProblem 415 when it is not JSON, 413 when it is longer, 400 when it cannot be parsed, 422 when it does
 * not fit the schema
 */
export async function readBody<T extends z.ZodMiniType>(
  request: Request,
  schema: T,
  limit: number,
): Promise<z.output<T>> {
  if (!/^application\/json\b/.test(request.headers.get('content-type') ?? '')) {
    throw new HttpProblem(415, 'not-json', 'Not JSON', 'Send application/json.');
  }
  const parsed = schema.safeParse(parseJson(await readText(request, limit)));
  if (parsed.success) return parsed.data as z.output<T>;
  const issue = parsed.error.issues[0];
  throw new HttpProblem(
    422,
    'unreadable',
    'Unreadable',
    `${issue?.path.join('.') || 'The body'}: ${issue?.message ?? 'does not fit'}.`,
  );
}

async function readText(request: Request, limit: number): Promise<string> {
  const tooLarge = () => new HttpProblem(413, 'too-large', 'Too large', `Send at most ${limit} bytes.`);
  if (Number(request.headers.get('content-length') ?? 0) > limit) throw tooLarge();
  const chunks: Uint8Array[] = [];
  let length = 0;
  for await (const chunk of request.body ?? []) {
    length += chunk.length;
    if (length > limit) throw tooLarge();
    chunks.push(chunk);
  }
  return Buffer.concat(chunks).toString('utf8');
}

const DEEPEST = 60;

function parseJson(text: string): unknown {
  let depth = 0;
  let inString = false;
  for (let n = 0; n < text.length; n++) {
    const letter = text[n];
    if (inString) {
      if (letter === '\\') n++;
      else if (letter === '"') inString = false;
    } else if (letter === '"') inString = true;
    else if (letter === '{' || letter === '[') depth++;
    else if (letter === '}' || letter === ']') depth--;
    if (depth > DEEPEST) throw new HttpProblem(400, 'too-deep', 'Too deep', `Nest at most ${DEEPEST} levels.`);
  }
  try {
    return JSON.parse(text) as unknown;
  } catch {
    throw new HttpProblem(400, 'bad-json', 'Not JSON', 'The body is not JSON, or was cut off.');
  }
}
