import type { Metadata } from "next";
import { UploadForm } from "@/components/samples/upload-form";

export const metadata: Metadata = { title: "Upload samples" };

export default function UploadPage() {
  return <UploadForm />;
}
