import type { Metadata } from "next";
import { AccountView } from "@/components/account/account-view";
import { requireActor } from "@/lib/http/page-auth";
import { describeActor } from "@/lib/services/users/describe-actor";

export const metadata: Metadata = { title: "Your account" };

export default async function AccountPage() {
  const actor = await requireActor("/account");
  const { limits } = describeActor(actor);
  return <AccountView facts={{ name: actor.name, email: actor.email, role: actor.role, scopes: actor.scopes, ...limits }} />;
}
