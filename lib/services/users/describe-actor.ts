import { env } from "@/lib/env";
import type { Actor } from "@/lib/schemas/actor";
import type { Me } from "@/lib/schemas/api";
import { ROLE_LIMITS, ROWS_PER_SOLVE } from "../access";

/** Who is asking, what this credential may do, and which limits apply. */
export function describeActor(actor: Actor): Me {
  return {
    id: actor.userId, email: actor.email, name: actor.name, role: actor.role, via: actor.via, scopes: [...actor.scopes],
    limits: { ...ROLE_LIMITS[actor.role], rowsPerSolve: ROWS_PER_SOLVE, requestsPerMinute: env().TUFA_REQUESTS_PER_MINUTE },
  };
}
