/** Finding or making the order that a `where` and a `sort` ask for. */
import { pool } from "@/db/client";
import type { ParsedQuery } from "@/lib/results/query";
import { readStoredChunks } from "./block-store";
import { buildOrder, type StoredOrder } from "./build-order";
import { runInThread } from "./export-threads";
import type { JobRow, ResultQuery } from "./types";

/** While a job goes on, an order this fresh serves again: a table that polls must not sort at every glance. */
const FRESH_MS = 2000;

const building = new Map<string, Promise<StoredOrder>>();

/**
 * The order of the rows stored just now under the query's `where` and `sort`: a stored one where job, chunks done,
 * where and sort are the same, else a new one, sorted in a thread. Only to be called with one of the two given.
 */
export async function findOrder(row: JobRow, words: ResultQuery, query: ParsedQuery): Promise<StoredOrder> {
  const { stored } = await readStoredChunks(row);
  const key = `${stored.length} ${query.orderKey}`;
  const known = await findStored(row, key, query.orderKey);
  if (known) return known;
  const running = `${row.id} ${key}`;
  let order = building.get(running);
  if (!order) {
    const chunks = stored.map((chunk) => chunk.index);
    order = runInThread({ kind: "order", jobId: row.id, words: { where: words.where, sort: words.sort }, key, chunks },
      () => buildOrder(row, query, stored, key));
    building.set(running, order);
    void order.catch(() => {}).finally(() => building.delete(running));
  }
  return order;
}

async function findStored(row: JobRow, key: string, orderKey: string): Promise<StoredOrder | null> {
  const { rows } = await pool().query<{ id: string; key: string; row_count: number; age_ms: number }>(
    `select id, key, row_count, extract(epoch from now() - created_at)::float8 * 1000 as age_ms from result_order where job_id = $1 order by created_at desc`, [row.id]);
  const found = rows.find((order) => order.key === key)
    ?? rows.find((order) => row.status === "running" && order.age_ms < FRESH_MS && order.key.slice(order.key.indexOf(" ") + 1) === orderKey);
  if (!found) return null;
  await touchOrder(found.id);
  return { id: found.id, rowCount: found.row_count };
}

/** Notes that an order was used, at most every 10 s, and gives its length; null when it was dropped. */
export async function touchOrder(id: string): Promise<number | null> {
  await pool().query("update result_order set last_used_at = now() where id = $1 and last_used_at < now() - interval '10 seconds'", [id]);
  const { rows: [order] } = await pool().query<{ row_count: number }>("select row_count from result_order where id = $1", [id]);
  return order?.row_count ?? null;
}
