import type { Metadata } from "next";
import { TokenPage } from "@/components/tokens/token-page";
import { requireActor } from "@/lib/http/page-auth";
import { ROLE_SCOPES } from "@/lib/services/access";

export const metadata: Metadata = { title: "API tokens" };

export default async function TokensPage() {
  const actor = await requireActor("/tokens");
  return <TokenPage scopes={ROLE_SCOPES[actor.role]} isAdministrator={actor.role === "administrator"} />;
}
