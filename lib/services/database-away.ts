// lib/http maps this error and may not reach into db itself.
export { isDatabaseAway } from "@/db/database-error";
