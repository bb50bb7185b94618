import { integer, jsonb, pgTable, primaryKey, text } from "drizzle-orm/pg-core";
import { appUser } from "./accounts";
import { bytea, instant } from "./columns";

export const sampleSet = pgTable("sample_set", {
  id: text().primaryKey(), // set_…
  ownerId: text("owner_id").notNull().references(() => appUser.id),
  name: text().notNull(),
  description: text().notNull().default(""),
  /** team: every signed-in person reads it; private: owner and administrators. */
  visibility: text({ enum: ["private", "team"] }).notNull().default("team"),
  latestVersion: integer("latest_version").notNull(),
  createdAt: instant("created_at").notNull().defaultNow(),
  deletedAt: instant("deleted_at"),
});

export const sampleSetVersion = pgTable("sample_set_version", {
  setId: text("set_id").notNull().references(() => sampleSet.id, { onDelete: "cascade" }),
  version: integer().notNull(),
  createdBy: text("created_by").notNull(),
  createdAt: instant("created_at").notNull().defaultNow(),
  note: text().notNull().default(""),
  waterCount: integer("water_count").notNull(),
  /** Default unit per column for bare numbers, as `waters.units` of the job spec. */
  units: jsonb().$type<Record<string, string>>().notNull(),
  /** Row keys that occur, in order of first appearance. */
  columns: jsonb().$type<string[]>().notNull(),
  /** Findings of the checks on the way in; flags never alter data. */
  flags: jsonb().$type<{ water: string; code: string; column: string | null; message: string }[]>().notNull(),
  rawName: text("raw_name"),
  rawType: text("raw_type"),
  raw: bytea("raw"),
}, (t) => [primaryKey({ columns: [t.setId, t.version] })]);

/** Waters of a version, 1,000 to a row of this table, each water an object as in `waters.rows` of the job spec. */
export const sampleChunk = pgTable("sample_chunk", {
  setId: text("set_id").notNull(),
  version: integer().notNull(),
  index: integer().notNull(),
  waters: jsonb().$type<Record<string, unknown>[]>().notNull(),
}, (t) => [primaryKey({ columns: [t.setId, t.version, t.index] })]);
