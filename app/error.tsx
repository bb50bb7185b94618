"use client";
import { Failure } from "@/components/shell/failure";

export default function ErrorPage(props: { error: Error & { digest?: string }; reset: () => void }) {
  return <main><Failure {...props} /></main>;
}
