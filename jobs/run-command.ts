/**
 * Runs the body of a command: a failure is one line on stderr and exit code 1, never a stack, so that stdout carries nothing but
 * the command's own answer.
 */
export async function runCommand(body: () => Promise<void>): Promise<void> {
  try {
    await body();
  } catch (error) {
    process.stderr.write(`${error instanceof Error ? error.message : String(error)}\n`);
    process.exit(1);
  }
}
