import { ESLint } from "eslint";
import path from "node:path";
import { expect, it } from "vitest";

const ROOT = path.resolve(import.meta.dirname, "../..");
const eslint = new ESLint({ cwd: ROOT });

async function rulesBroken(filePath: string, code: string): Promise<(string | null)[]> {
  const [{ messages }] = await eslint.lintText(code, { filePath: path.join(ROOT, filePath) });
  return messages.map(({ ruleId }) => ruleId);
}

it.each([
  ["lib/kernel/newton.ts", 'import { errorTable } from "@/lib/errors";\nvoid errorTable;'],
  ["lib/kernel/newton.ts", 'import fs from "node:fs";\nvoid fs;'],
  ["lib/chemistry/units.ts", 'import { db } from "../../db/client";\nvoid db;'],
  ["lib/services/jobs/create.ts", 'import { route } from "@/lib/http/route";\nvoid route;'],
  ["components/ui/button.tsx", 'import { job } from "@/lib/schemas/api";\nvoid job;'],
  ["components/console/prompt.tsx", 'import { createJob } from "@/lib/services/jobs/create";\nvoid createJob;'],
  ["app/api/v1/jobs/route.ts", 'import { sql } from "drizzle-orm";\nvoid sql;'],
  ["app/(console)/page.tsx", 'export const load = () => import("@/db/client");'],
  ["db/client.ts", 'export * from "@/lib/services/access";'],
])("an import against the arrows in %s is an error", async (file, code) => {
  expect(await rulesBroken(file, code)).toContain("tufa/arrows");
}, 30_000);

it.each([
  ["lib/kernel/newton.ts", 'import { dot } from "./linear";\nvoid dot;'],
  ["lib/services/jobs/create.ts", 'import { enqueueJob } from "@/jobs/queue";\nvoid enqueueJob;'],
  ["db/demo/seed.ts", 'import { createJob } from "@/lib/services/jobs/create";\nvoid createJob;'],
  ["app/api/v1/jobs/route.ts", 'import { route } from "@/lib/http/route";\nvoid route;'],
])("an import along the arrows in %s is not", async (file, code) => {
  expect(await rulesBroken(file, code)).not.toContain("tufa/arrows");
}, 30_000);

it("the environment is read in lib/env.ts alone", async () => {
  const code = "export const port = process.env.PORT;";
  expect(await rulesBroken("lib/http/route.ts", code)).toContain("no-restricted-syntax");
  expect(await rulesBroken("lib/env.ts", code)).not.toContain("no-restricted-syntax");
}, 30_000);
