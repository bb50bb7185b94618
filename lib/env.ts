import { z } from "zod";

/** The only reader of process.env. A value that does not parse stops the process at once, with its name. */
const shape = z.object({
  DATABASE_URL: z.string().min(1, "DATABASE_URL is missing; `npm start` sets it for the embedded server"),
  NEXTAUTH_SECRET: z.string().min(32).optional(),
  /** Where browsers reach the product; http://127.0.0.1:PORT unless set. */
  TUFA_PUBLIC_URL: z.url().optional(),
  HOST: z.string().default("127.0.0.1"),
  PORT: z.coerce.number().int().default(3000),
  TUFA_DATA_DIR: z.string().default(".data"),
  /** Set by the launcher: "embedded" (demo is seeded) or "outside". */
  TUFA_DATABASE: z.enum(["embedded", "outside"]).default("outside"),
  WORKERS: z.coerce.number().int().min(1).max(256).optional(),
  TUFA_LEASE_MS: z.coerce.number().int().min(200).default(10_000),
  TUFA_LOG: z.enum(["silent", "error", "warn", "info", "debug"]).default("info"),
  /** Requests a person may make in a minute, over sessions and tokens together. */
  TUFA_REQUESTS_PER_MINUTE: z.coerce.number().int().min(1).default(1200),
  NODE_ENV: z.string().default("development"),
});
export type Env = z.infer<typeof shape>;

let parsed: Env | undefined;

/** The environment, parsed once. Throws with every faulty name listed. */
export function env(): Env {
  if (!parsed) {
    // `WORKERS= npm start` means that it is not set, as everywhere in a shell.
    const result = shape.safeParse(Object.fromEntries(Object.entries(process.env).filter(([, value]) => value !== "")));
    if (!result.success) {
      throw new Error("Environment: " + result.error.issues.map((i) => `${i.path.join(".")}: ${i.message}`).join("; "));
    }
    parsed = result.data;
    // next-auth reads this itself, and without it would build links to localhost:3000.
    process.env.NEXTAUTH_URL ??= publicUrl(parsed);
  }
  return parsed;
}

/** Address under which browsers reach the product, without a slash at the end. */
export function publicUrl(e: Env): string {
  return (e.TUFA_PUBLIC_URL ?? `http://${e.HOST.includes(":") ? `[${e.HOST}]` : e.HOST}:${e.PORT}`).replace(/\/+$/, "");
}
