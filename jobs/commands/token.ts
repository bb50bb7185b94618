/** `npm run token -- --email E [--scopes a,b|all] [--expires 90d|never] [--name N]`: makes an API token and prints just that. */
import { parseArgs } from "node:util";
import { closeDb } from "@/db/client";
import { SCOPES, type Scope } from "@/lib/schemas/actor";
import { commandActor, ROLE_SCOPES } from "@/lib/services/access";
import { createToken, TOKEN_DEFAULT_DAYS } from "@/lib/services/tokens/create";
import { findUserByEmail } from "@/lib/services/users/find";
import { runCommand } from "../run-command";

const DAY_MS = 86_400_000;
/** What a token gets unless --scopes says otherwise: enough to look, too little to change anything. */
const DEFAULT_SCOPES: readonly Scope[] = ["jobs:read", "samples:read"];

function scopesOf(text: string | undefined, allowed: readonly Scope[]): readonly Scope[] {
  if (text === undefined) return DEFAULT_SCOPES;
  if (text === "all") return allowed;
  return text.split(",").map((each) => {
    const scope = SCOPES.find((known) => known === each.trim());
    if (!scope) throw new Error(`--scopes ${each}: there is no such scope. Write all, or some of ${SCOPES.join(",")}.`);
    return scope;
  });
}

function expiryOf(text: string): string | null {
  if (text === "never") return null;
  const days = /^(\d+)d$/.exec(text)?.[1];
  if (!days) throw new Error(`--expires ${text}: write a number of days such as 90d, or never.`);
  return new Date(Date.now() + Number(days) * DAY_MS).toISOString();
}

await runCommand(async () => {
  const { values } = parseArgs({
    options: { email: { type: "string" }, scopes: { type: "string" }, expires: { type: "string", default: `${TOKEN_DEFAULT_DAYS}d` }, name: { type: "string", default: "npm run token" } },
  });
  if (!values.email) throw new Error("Whose token? npm run token -- --email E [--scopes a,b|all] [--expires 90d]");
  const user = await findUserByEmail(values.email);
  if (!user) throw new Error(`Nobody has the address ${values.email}.`);
  if (user.state === "disabled") throw new Error(`${user.email} is disabled; a token of theirs would not work.`);
  const scopes = scopesOf(values.scopes, ROLE_SCOPES[user.role]);
  const { token } = await createToken(commandActor(user), { name: values.name, scopes, expiresAt: expiryOf(values.expires) });
  process.stdout.write(`${token}\n`);
  await closeDb();
});
