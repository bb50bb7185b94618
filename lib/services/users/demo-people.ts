import people from "@/db/demo/people.json";
import { env } from "@/lib/env";

export interface DemoAccount { name: string; email: string; role: string; password: string }

/** The demo's accounts with their known passwords; none where the database is not the embedded, seeded one. */
export const demoAccounts = (): readonly DemoAccount[] => (env().TUFA_DATABASE === "embedded" ? people : []);
