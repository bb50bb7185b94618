import type { Metadata } from "next";
import { UploadForm } from "@/components/samples/upload-form";
import { requireActor } from "@/lib/http/page-auth";

export const metadata: Metadata = { title: "Upload samples" };

export default async function UploadPage() {
  await requireActor("/samples/new");
  return <UploadForm />;
}
