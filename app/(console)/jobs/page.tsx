import type { Metadata } from "next";
import { JobList } from "@/components/jobs/job-list";
import { requireActor } from "@/lib/http/page-auth";

export const metadata: Metadata = { title: "Jobs" };

export default async function JobsPage() {
  await requireActor("/jobs");
  return <JobList />;
}
