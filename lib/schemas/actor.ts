/** Who is asking. Built once per request in lib/http/auth.ts; every service verb takes it as its first argument. */
export const SCOPES = ["jobs:read", "jobs:write", "samples:read", "samples:write", "admin"] as const;
export type Scope = (typeof SCOPES)[number];
export type Role = "administrator" | "modeller" | "analyst";

export interface Actor {
  userId: string;
  email: string;
  name: string;
  role: Role;
  via: "session" | "token" | "command";
  /** Session actors hold every scope their role allows; token actors the intersection with the token's. */
  scopes: readonly Scope[];
  sessionId: string | null;
  tokenId: string | null;
  requestId: string | null;
}
