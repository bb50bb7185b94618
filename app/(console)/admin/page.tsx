import type { Metadata } from "next";
import { AuditTrail } from "@/components/admin/audit-trail";
import { People } from "@/components/admin/people";
import { SystemHealth } from "@/components/admin/system-health";
import { Page } from "@/components/ui/page";
import { requireActor } from "@/lib/http/page-auth";

export const metadata: Metadata = { title: "People" };

export default async function AdminPage() {
  const actor = await requireActor("/admin", "administrator");
  return (
    <Page title="People and system" isWide>
      <SystemHealth />
      <People meId={actor.userId} />
      <AuditTrail />
    </Page>
  );
}
