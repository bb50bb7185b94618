/** `npm run db:migrate`: tables and queues, as far as they are missing. With `--demo`, for the embedded database, the demo too. */
import { parseArgs } from "node:util";
import { closeDb, db } from "@/db/client";
import { seedDemo } from "@/db/demo/seed";
import { migrateDatabase } from "@/db/migrate";
import { env } from "@/lib/env";
import { prepareQueues } from "../queue";
import { runCommand } from "../run-command";

await runCommand(async () => {
  const { values } = parseArgs({ options: { demo: { type: "boolean", default: false } } });
  await migrateDatabase(env().DATABASE_URL);
  await prepareQueues();
  if (values.demo) {
    if (env().TUFA_DATABASE !== "embedded") throw new Error("The demo goes into the embedded database only: its passwords are known to everybody.");
    if (await seedDemo(db())) process.stdout.write("demo-seeded\n");
  }
  await closeDb();
});
