/** SQLSTATE classes and socket codes that say the database is away or going away, not that the statement is wrong. */
const AWAY = /^(08...|57P0.|53...|40001|40P01|25P0.|ECONNREFUSED|ECONNRESET|ECONNABORTED|EPIPE|ETIMEDOUT|ENOTFOUND|EAI_AGAIN)$/;
const AWAY_TEXT = /Connection terminated|timeout exceeded when trying to connect|server closed the connection|not queryable|Cannot use a pool after|terminating connection/i;

/** True when trying again later may help: the connection was lost or refused, or the transaction met another. */
export function isDatabaseAway(error: unknown): boolean {
  for (let cause: unknown = error; cause instanceof Error; cause = cause.cause) {
    const code = (cause as { code?: unknown }).code;
    if (typeof code === "string" && AWAY.test(code)) return true;
    if (AWAY_TEXT.test(cause.message)) return true;
    if (cause instanceof AggregateError && cause.errors.some(isDatabaseAway)) return true;
  }
  return false;
}
