/** `2026-… [pid] user@database LOG:  execute <unnamed>: …`, as the cluster's log_line_prefix has it. */
const LINE = /^\S+ \S+ \S+ \[\d+\] (\S+) LOG:\s+(?:statement|execute ([^:]+)): (.*)$/;

/** What would stay on a connection when its transaction is over, and so reach whoever the pooler gives it to next. */
const LEAVES = [
  /^set (?!transaction\b|local\b)/i,
  /set_config\([^()]*,\s*false\)/i,
  /pg_(try_)?advisory_(?!xact)(un)?lock/i,
  /^(listen|unlisten|notify|discard|load|reset|prepare|deallocate)\b/i,
  /^create (local |global )?temp/i,
  /\bwith hold\b/i,
];

/** Counts the statements of one `user@database` in PostgreSQL's log, and lists those that leave something behind. */
export function sessionWords(log: string, session: string): { statements: number; left: string[] } {
  const left: string[] = [];
  let statements = 0;
  for (const { name, text } of readStatements(log, session)) {
    statements += 1;
    const named = name !== undefined && name !== '<unnamed>';
    if (named || LEAVES.some((pattern) => pattern.test(text))) left.push(text);
  }
  return { statements, left };
}

function* readStatements(log: string, session: string): Generator<{ name: string | undefined; text: string }> {
  let open: { name: string | undefined; text: string } | undefined;
  for (const line of log.split('\n')) {
    // The lines of one statement after its first begin with a tab.
    if (open !== undefined && line.startsWith('\t')) {
      open.text += ` ${line.trim()}`;
      continue;
    }
    if (open !== undefined) yield open;
    const [, of, name, text] = LINE.exec(line) ?? [];
    open = of === session && text !== undefined ? { name, text: text.trim() } : undefined;
  }
  if (open !== undefined) yield open;
}
