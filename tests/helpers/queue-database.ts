import pg from "pg";
import { vi } from "vitest";
import { closeDb } from "@/db/client";
import { migrateDatabase } from "@/db/migrate";
import { prepareQueues } from "@/jobs/queue";
import { randomBase62 } from "@/lib/ids";
import { closeEventHub } from "@/lib/services/events/subscribe-job-events";

/** URL of a throw-away server on this machine whose user may create databases; the test runner starts it and says so. */
function serverUrl(): URL {
  const text = process.env.TUFA_TEST_SERVER;
  if (!text) throw new Error("TUFA_TEST_SERVER is missing: the URL of a throw-away PostgreSQL whose user may create databases");
  const url = new URL(text);
  if (!["127.0.0.1", "localhost", "[::1]"].includes(url.hostname)) throw new Error(`TUFA_TEST_SERVER is on ${url.hostname}; tests touch no database that is not local`);
  return url;
}

/** A database of its own for a test file, migrated, as this process's DATABASE_URL. */
export async function openQueueDatabase(): Promise<{ url: string; drop: () => Promise<void> }> {
  const name = `t_${randomBase62(10).toLowerCase()}`;
  const base = serverUrl();
  const server = new pg.Client(base.href);
  await server.connect();
  await server.query(`create database ${name}`);
  const url = Object.assign(base, { pathname: `/${name}` }).href;
  vi.stubEnv("DATABASE_URL", url);
  await migrateDatabase(url);
  await prepareQueues();
  return {
    url,
    drop: async () => {
      await closeEventHub();
      await closeDb();
      await server.query(`drop database ${name} with (force)`);
      await server.end();
    },
  };
}
