import { index, pgTable, text } from "drizzle-orm/pg-core";
import { bytea, instant } from "./columns";

export const ROLES = ["administrator", "modeller", "analyst"] as const;
export type Role = (typeof ROLES)[number];

export const appUser = pgTable("app_user", {
  id: text().primaryKey(), // usr_…
  email: text().notNull().unique(), // lower case
  name: text().notNull(),
  role: text({ enum: ROLES }).notNull(),
  passwordHash: text(), // argon2id; null until the one-time link is used
  createdAt: instant("created_at").notNull().defaultNow(),
  lastSignInAt: instant("last_sign_in_at"),
  disabledAt: instant("disabled_at"),
});

/** Looked up at every request by the JWT's `sid`: signing out and disabling bite at once. */
export const session = pgTable("session", {
  sid: text().primaryKey(),
  userId: text("user_id").notNull().references(() => appUser.id, { onDelete: "cascade" }),
  createdAt: instant("created_at").notNull().defaultNow(),
  lastSeenAt: instant("last_seen_at").notNull().defaultNow(),
  expiresAt: instant("expires_at").notNull(),
  revokedAt: instant("revoked_at"),
  userAgent: text("user_agent"),
}, (t) => [index("session_user").on(t.userId)]);

/** One-time links (set a password). Only the SHA-256 of the secret is stored. */
export const oneTimeLink = pgTable("one_time_link", {
  id: text().primaryKey(),
  userId: text("user_id").notNull().references(() => appUser.id, { onDelete: "cascade" }),
  purpose: text({ enum: ["set-password"] }).notNull(),
  hash: bytea().notNull().unique(),
  createdAt: instant("created_at").notNull().defaultNow(),
  expiresAt: instant("expires_at").notNull(),
  usedAt: instant("used_at"),
});

/** API tokens: prefix, last four and SHA-256 only; the token itself is shown once. */
export const apiToken = pgTable("api_token", {
  id: text().primaryKey(), // tok_…
  userId: text("user_id").notNull().references(() => appUser.id, { onDelete: "cascade" }),
  name: text().notNull(),
  prefix: text().notNull(), // the public part, e.g. "tufa_a1B2c3"
  lastFour: text("last_four").notNull(),
  hash: bytea().notNull().unique(),
  scopes: text().array().notNull(),
  createdBy: text("created_by").notNull(),
  createdAt: instant("created_at").notNull().defaultNow(),
  expiresAt: instant("expires_at"),
  lastUsedAt: instant("last_used_at"),
  revokedAt: instant("revoked_at"),
  revokedBy: text("revoked_by"),
}, (t) => [index("api_token_user").on(t.userId)]);
