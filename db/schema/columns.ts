import { customType, timestamp } from "drizzle-orm/pg-core";

/** PostgreSQL bytea as a Node Buffer; drizzle has no built-in type for it. */
export const bytea = customType<{ data: Buffer; driverData: Buffer }>({ dataType: () => "bytea" });

/** A UTC instant. Every time in the product is one; RFC 3339 on the way out. */
export const instant = (name: string) => timestamp(name, { withTimezone: true, mode: "date", precision: 3 });
