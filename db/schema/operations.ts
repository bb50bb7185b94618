import { bigserial, index, integer, jsonb, pgTable, primaryKey, text } from "drizzle-orm/pg-core";
import { instant } from "./columns";

/** Who did what, for the audit trail. Never holds secrets. */
export const auditEvent = pgTable("audit_event", {
  id: bigserial({ mode: "number" }).primaryKey(),
  at: instant("at").notNull().defaultNow(),
  actorId: text("actor_id"), // null: nobody signed in (a failed sign-in)
  via: text({ enum: ["session", "token", "command", "system"] }).notNull(),
  action: text().notNull(), // noun-verb: "token-created", "sign-in-failed"
  target: text(),
  detail: jsonb().$type<Record<string, unknown>>().notNull(),
  requestId: text("request_id"),
}, (t) => [index("audit_at").on(t.at)]);

/** First answer to a request with an Idempotency-Key, kept for 24 h. */
export const idempotencyKey = pgTable("idempotency_key", {
  userId: text("user_id").notNull(),
  key: text().notNull(),
  requestHash: text("request_hash").notNull(),
  responseStatus: integer("response_status"), // null while in flight
  responseBody: jsonb("response_body"),
  location: text(),
  createdAt: instant("created_at").notNull().defaultNow(),
}, (t) => [primaryKey({ columns: [t.userId, t.key] })]);

/** Fixed-window counters (sign-in per account and globally, requests per user). */
export const rateWindow = pgTable("rate_window", {
  bucket: text().notNull(),
  windowStart: instant("window_start").notNull(),
  count: integer().notNull(),
}, (t) => [primaryKey({ columns: [t.bucket, t.windowStart] })]);
