import { drizzle, type NodePgDatabase } from "drizzle-orm/node-postgres";
import pg from "pg";
import { env } from "@/lib/env";
import * as schema from "./schema";

export type Db = NodePgDatabase<typeof schema>;
export type Tx = Parameters<Parameters<Db["transaction"]>[0]>[0];

// One pool a process, also across the dev server's module reloads.
const held = globalThis as { tufaPool?: pg.Pool; tufaDb?: Db };

/** The process's connection pool (up to 10 connections). */
export function pool(): pg.Pool {
  if (!held.tufaPool) {
    held.tufaPool = new pg.Pool({ connectionString: env().DATABASE_URL, max: 10, application_name: "tufa" });
    // An idle client that loses its server emits here; without a listener the process would die of it.
    held.tufaPool.on("error", () => {});
    // Likewise a client inside a transaction that is waiting for something else than the database.
    held.tufaPool.on("connect", (client) => client.on("error", () => {}));
  }
  return held.tufaPool;
}

/** Drizzle over the pool, with the whole schema. */
export function db(): Db {
  return (held.tufaDb ??= drizzle(pool(), { schema, casing: "snake_case" }));
}

/** Ends the pool, for scripts, workers and tests that want to exit. */
export async function closeDb(): Promise<void> {
  const open = held.tufaPool;
  held.tufaPool = undefined;
  held.tufaDb = undefined;
  await open?.end();
}
