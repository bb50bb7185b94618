import { isDatabaseAway } from "@/db/database-error";

function reasonOf(error: unknown): string {
  if (!(error instanceof Error)) return String(error);
  // The driver's own words stand in the cause; drizzle's message is the whole statement with its parameters.
  const { message } = error.cause instanceof Error && error.cause.message ? error.cause : error;
  return isDatabaseAway(error) ? `The database does not answer: ${message}` : message;
}

/**
 * Runs the body of a command: a failure is one line on stderr and exit code 1, never a stack, so that stdout carries nothing but
 * the command's own answer.
 */
export async function runCommand(body: () => Promise<void>): Promise<void> {
  try {
    await body();
  } catch (error) {
    process.stderr.write(`${reasonOf(error)}\n`);
    process.exit(1);
  }
}
