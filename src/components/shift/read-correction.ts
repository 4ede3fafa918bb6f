import type { Operation } from '#contract/operation.ts';
import { type OperationBody, operationBodies } from '#contract/operation-bodies.ts';
import { type EntryField, keyOf, readField, typedOf } from './entry-field.ts';

export type Typed = Readonly<Record<string, string>>;

/** What the form says; a problem belongs to one field by its key, or to the whole: ''. */
export type Correction = { body: OperationBody; changed: boolean } | { problems: Readonly<Record<string, string>> };

/** The refused entry with what was typed in its place; changes of content are reckoned anew, and its own schema decides. */
export function readCorrection(operation: Operation, fields: readonly EntryField[], typed: Typed): Correction {
  const body = structuredClone(operation.body) as Record<string, unknown>;
  const problems: Record<string, string> = {};
  let changed = false;
  for (const field of fields) {
    if (field.kind === 'fixed') continue;
    const text = typed[keyOf(field)] ?? typedOf(field);
    const read = readField(field, text);
    if ('problem' in read) problems[keyOf(field)] = read.problem;
    else if ((read.value ?? null) !== (field.value ?? null)) {
      changed = true;
      put(body, field, read.value);
    }
  }
  if (Object.keys(problems).length > 0) return { problems };
  const whole = { type: operation.type, body } as OperationBody;
  const problem = reckon(whole) ?? whyUnfit(whole);
  return problem === undefined ? { body: whole, changed } : { problems: problem };
}

function put(body: Record<string, unknown>, { path }: EntryField, value: unknown): void {
  const at = path.slice(0, -1).reduce<Record<string, unknown>>((part, step) => part[step] as typeof part, body);
  const last = path.at(-1) ?? '';
  // A new name is left out where there is none; everything else that may be empty is null.
  if (value === null && !(last in at)) return;
  if (value === null && path[0] === 'name') delete at[last];
  else at[last] = value;
}

/** What follows from what was weighed; the change stays that of the time at which it was on the scale. */
function reckon(entry: OperationBody): Record<string, string> | undefined {
  if (entry.type === 'bucket-returned' || entry.type === 'bucket-recounted') {
    const netMg = entry.body.grossMg - entry.body.tareMg;
    if (netMg < 0) return { grossMg: 'Gross is below the empty weight. Type the other one, or weigh again.' };
    entry.body.deltaMg = netMg - entry.body.displayedMg;
  }
  if (entry.type === 'bucket-adopted' && entry.body.grossMg <= entry.body.tareMg)
    return { grossMg: 'Gross is not above the empty weight. Type the other one, or weigh again.' };
  if (entry.type !== 'batch-mixed') return undefined;
  const added = sum(entry.body.additions.map(({ actualMg }) => actualMg));
  const filled = sum(entry.body.filled.map(({ massMg }) => massMg));
  if (added === filled) return undefined;
  return { '': `${added / 1000} g went in and ${filled / 1000} g were filled. Make them the same.` };
}

interface Schema {
  safeParse: (body: unknown) => { success: boolean; error?: { issues: { path: PropertyKey[]; message: string }[] } };
}

function whyUnfit({ type, body }: OperationBody): Record<string, string> | undefined {
  const schema: Schema = operationBodies[type];
  const [issue] = schema.safeParse(body).error?.issues ?? [];
  return issue === undefined ? undefined : { [issue.path.join('.')]: `Not valid: ${issue.message}.` };
}

const sum = (masses: readonly number[]) => masses.reduce((total, mass) => total + mass, 0);
