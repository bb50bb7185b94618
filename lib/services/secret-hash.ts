import { createHash } from "node:crypto";

/** SHA-256 of a random secret. Plain and unsalted is enough here: the secrets hold more than 119 random bits. */
export const secretHash = (secret: string): Buffer => createHash("sha256").update(secret, "utf8").digest();
