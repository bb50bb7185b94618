import type { Metadata } from "next";
import { notFound } from "next/navigation";
import { JobView } from "@/components/results/job-view";
import { AppError } from "@/lib/errors";
import { requireActor } from "@/lib/http/page-auth";
import { getJob } from "@/lib/services/jobs/find";

export const metadata: Metadata = { title: "Job" };

type Search = Record<string, string | string[] | undefined>;

/** The query as text again: the view reads it once, on the server and in the browser alike. */
const searchText = (search: Search): string =>
  new URLSearchParams(Object.entries(search).flatMap(([key, value]) => (value === undefined ? [] : [value].flat().map((each) => [key, each] as [string, string])))).toString();

export default async function JobPage({ params, searchParams }: { params: Promise<{ id: string }>; searchParams: Promise<Search> }) {
  const [{ id }, search] = [await params, searchText(await searchParams)];
  const actor = await requireActor(`/jobs/${id}${search ? `?${search}` : ""}`);
  const job = await getJob(actor, id).catch((error: unknown) => {
    if (error instanceof AppError && error.code === "not-found") notFound();
    throw error;
  });
  return <JobView initial={job} me={{ id: actor.userId }} search={search} />;
}
