import path from "node:path";
import { drizzle } from "drizzle-orm/node-postgres";
import { migrate } from "drizzle-orm/node-postgres/migrator";
import pg from "pg";

/** Serialises launchers and workers that start together: drizzle's migrator takes no lock of its own. */
const MIGRATE_LOCK = 7_245_800;

/** From db/ as well as from a bundle in .build/: both stand one level below the root. */
const FOLDER = path.resolve(import.meta.dirname, "../drizzle");

/** Applies what is missing of drizzle/ to a database. Safe to call often and from several processes at once. */
export async function migrateDatabase(url: string): Promise<void> {
  const client = new pg.Client({ connectionString: url, application_name: "tufa-migrate" });
  await client.connect();
  try {
    await client.query("select pg_advisory_lock($1)", [MIGRATE_LOCK]);
    await migrate(drizzle(client), { migrationsFolder: FOLDER });
  } finally {
    // Ending the connection gives the lock back, also where the migration failed.
    await client.end();
  }
}
