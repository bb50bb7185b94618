import type { ReactNode } from "react";
import { Wordmark } from "@/components/ui/wordmark";

export default function AuthLayout({ children }: { children: ReactNode }) {
  return (
    <main className="mx-auto flex min-h-dvh w-full max-w-md flex-col justify-center gap-6 px-5 py-10">
      <Wordmark className="text-2xl" />
      {children}
    </main>
  );
}
