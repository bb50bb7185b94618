/**
 * The demo of a fresh clone: three people with known passwords, four sample sets, two jobs. Only ever into the embedded database; the
 * caller sees to that. Everything goes through the services that people use, so it is checked, flagged and audited alike; the jobs wait on
 * the queue and the workers solve them when they first start.
 */
import { and, eq, sql } from "drizzle-orm";
import type { Db } from "@/db/client";
import { appUser, auditEvent, job, sampleSet } from "@/db/schema";
import type { Actor } from "@/lib/schemas/actor";
import { commandActor } from "@/lib/services/access";
import { recordAudit } from "@/lib/services/audit/record";
import { prepareSamples } from "@/lib/services/intake/prepare-samples";
import { prepareSpec } from "@/lib/services/intake/prepare-spec";
import { createJob } from "@/lib/services/jobs/create";
import { createSampleSet } from "@/lib/services/samples/create";
import { createUser } from "@/lib/services/users/create";
import { setPassword } from "@/lib/services/users/password-link";
import { demoJobs } from "./jobs";
import people from "./people.json";
import { type DemoSet, sallowmereSets } from "./sallowmere";

export interface DemoPerson { name: string; email: string; role: "administrator" | "modeller" | "analyst"; password: string }
export const DEMO_PEOPLE = people as DemoPerson[];

const SEED_LOCK = 7_245_811;
const bytesOf = (document: unknown): Uint8Array => new TextEncoder().encode(JSON.stringify(document));

/**
 * Seeds the demo once. A second call, or one after somebody has deleted parts of it, does nothing; a call after a seeding that was cut off
 * adds what is missing. Returns whether anything was seeded.
 */
export async function seedDemo(database: Db): Promise<boolean> {
  return database.transaction(async (tx) => {
    // Held while the services work over connections of their own: two launchers of one clone never seed side by side.
    await tx.execute(sql`select pg_advisory_xact_lock(${SEED_LOCK})`);
    const [done] = await database.select({ id: auditEvent.id }).from(auditEvent).where(eq(auditEvent.action, "demo-seeded")).limit(1);
    if (done) return false;
    const actors = new Map<string, Actor>();
    for (const person of DEMO_PEOPLE) actors.set(person.email, await seedPerson(database, person));
    const keeper = actorOf(actors, DEMO_PEOPLE[2].email);
    const ids = new Map<string, string>();
    for (const set of sallowmereSets()) ids.set(set.name, await seedSet(database, keeper, set));
    const setIds = { becks: idOf(ids, "Sallowmere becks (invented)"), springs: idOf(ids, "Sallowmere springs (invented)") };
    for (const { owner, document } of demoJobs(setIds)) await seedJob(database, actorOf(actors, owner), document);
    await recordAudit(database, null, { action: "demo-seeded", target: null, detail: { people: DEMO_PEOPLE.length, sampleSets: ids.size } });
    return true;
  });
}

async function seedPerson(database: Db, person: DemoPerson): Promise<Actor> {
  const find = () => database.select().from(appUser).where(eq(appUser.email, person.email));
  let [row] = await find();
  if (!row) {
    await createUser(null, { email: person.email, name: person.name, role: person.role });
    [row] = await find();
  }
  if (row.passwordHash === null) await database.transaction((tx) => setPassword(tx, row, person.password));
  return commandActor(row);
}

async function seedSet(database: Db, owner: Actor, set: DemoSet): Promise<string> {
  const [found] = await database.select({ id: sampleSet.id }).from(sampleSet).where(and(eq(sampleSet.ownerId, owner.userId), eq(sampleSet.name, set.name)));
  if (found) return found.id;
  const bytes = bytesOf({ ...set, visibility: "team", note: "Invented demo data" });
  const upload = { bytes, format: "json" as const, rawName: null };
  const prepared = prepareSamples({ ...upload, purpose: "set", name: null, description: "", visibility: "team", note: "" });
  return (await createSampleSet(owner, prepared, upload)).id;
}

async function seedJob(database: Db, owner: Actor, document: Record<string, unknown>): Promise<void> {
  const [found] = await database.select({ id: job.id }).from(job).where(and(eq(job.ownerId, owner.userId), eq(job.title, String(document.title))));
  if (!found) await createJob(owner, { prepared: prepareSpec(bytesOf(document)), visibility: "team", idempotencyKey: null });
}

function actorOf(actors: ReadonlyMap<string, Actor>, email: string): Actor {
  const actor = actors.get(email);
  if (!actor) throw new Error(`people.json has nobody with the address ${email}`);
  return actor;
}

function idOf(ids: ReadonlyMap<string, string>, name: string): string {
  const id = ids.get(name);
  if (!id) throw new Error(`sallowmere.ts has no sample set called ${name}`);
  return id;
}
