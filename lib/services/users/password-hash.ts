import { hash, verify } from "@node-rs/argon2";

// OWASP: Argon2id with 19 MiB, two passes, one lane (the package's default algorithm is Argon2id).
const COST = { memoryCost: 19 * 1024, timeCost: 2, parallelism: 1 } as const;

/** Argon2id hash in its usual text form. */
export const hashPassword = (password: string): Promise<string> => hash(password.normalize("NFC"), COST);

// A hash of nothing anybody can type, so that an unknown address costs as much time as a known one.
let decoy: Promise<string> | undefined;

/** Whether the password fits. A missing hash is answered `false` after the same work. */
export async function verifyPassword(stored: string | null, password: string): Promise<boolean> {
  decoy ??= hashPassword(`decoy ${Math.random()} ${Date.now()}`);
  const fits = await verify(stored ?? (await decoy), password.normalize("NFC"));
  return stored !== null && fits;
}
