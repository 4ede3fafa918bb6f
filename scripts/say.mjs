/** A problem the person at the keyboard can act on: its message is one sentence, shown without a trace. */
export class StartError extends Error {}

/** @param {string} line */
export function say(line) {
  process.stdout.write(`${line}\n`);
}

/**
 * Runs a command; a StartError becomes one sentence on standard error, anything else its trace, and both end non-zero.
 * @param {() => Promise<void>} work
 */
export async function runCommand(work) {
  try {
    await work();
  } catch (error) {
    process.stderr.write(`${error instanceof StartError ? error.message : traceOf(error)}\n`);
    process.exitCode = 1;
  }
}

/** @param {unknown} error */
function traceOf(error) {
  return error instanceof Error ? (error.stack ?? error.message) : String(error);
}
