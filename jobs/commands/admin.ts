/**
 * `npm run admin -- --email E [--name N]`: makes an administrator, or takes the one who has that address, and prints a one-time link for
 * setting a password. Whoever runs it holds the database anyway.
 */
import { parseArgs } from "node:util";
import { closeDb } from "@/db/client";
import { migrateDatabase } from "@/db/migrate";
import { env } from "@/lib/env";
import { userCreate } from "@/lib/schemas/api";
import { createUser } from "@/lib/services/users/create";
import { findUserByEmail } from "@/lib/services/users/find";
import { createPasswordLink } from "@/lib/services/users/password-link";
import { runCommand } from "../run-command";

await runCommand(async () => {
  const { values } = parseArgs({ options: { email: { type: "string" }, name: { type: "string" } } });
  if (!values.email) throw new Error("Whose account? npm run admin -- --email you@lab.example [--name N]");
  await migrateDatabase(env().DATABASE_URL);
  const found = await findUserByEmail(values.email);
  if (found && found.role !== "administrator") throw new Error(`${found.email} is ${found.role} already; an administrator changes roles on the people page.`);
  if (found?.state === "disabled") throw new Error(`${found.email} is disabled; another administrator enables them on the people page.`);
  const user = found ?? (await createUser(null, readWish(values.email, values.name)));
  const link = await createPasswordLink(null, user.id);
  process.stdout.write(`${found ? "Administrator there already" : "Administrator made"}: ${user.email}\nOpen this once, before ${link.expiresAt.slice(0, 10)}, to set the password:\n${link.url}\n`);
  await closeDb();
});

function readWish(email: string, name: string | undefined) {
  const wish = userCreate.safeParse({ email, name: name ?? email.split("@")[0], role: "administrator" });
  if (!wish.success) throw new Error(wish.error.issues.map((issue) => `--${issue.path.join(".")}: ${issue.message}`).join("; "));
  return wish.data;
}
