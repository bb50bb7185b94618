import pino from "pino";
import { env } from "@/lib/env";
import { TOKEN_PATTERN } from "@/lib/services/tokens/token-format";

const held = globalThis as { tufaLog?: pino.Logger };

/** The web process's log: JSON lines on stderr. Whatever looks like a token is blanked before it is written. */
export function log(): pino.Logger {
  held.tufaLog ??= pino({
    level: env().TUFA_LOG, base: undefined, timestamp: pino.stdTimeFunctions.isoTime,
    hooks: { streamWrite: (line: string) => line.replace(TOKEN_PATTERN, "tufa_[removed]") },
  }, pino.destination({ fd: 2, sync: true }));
  return held.tufaLog;
}
