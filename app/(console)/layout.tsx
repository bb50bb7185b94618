import type { ReactNode } from "react";
import { CommandPalette } from "@/components/console/command-palette";
import { QueryProvider } from "@/components/shell/query-provider";
import { TopBar } from "@/components/shell/top-bar";
import { requireActor } from "@/lib/http/page-auth";

export default async function ConsoleLayout({ children }: { children: ReactNode }) {
  const actor = await requireActor();
  return (
    <div className="flex h-dvh min-h-0 flex-col">
      <a href="#main" className="sr-only focus:not-sr-only focus:absolute focus:left-2 focus:top-2 focus:z-50 focus:bg-raised focus:px-3 focus:py-2">Skip to the content</a>
      <TopBar name={actor.name} role={actor.role} />
      <main id="main" tabIndex={-1} className="min-h-0 flex-1 overflow-y-auto outline-none"><QueryProvider>{children}</QueryProvider></main>
      <CommandPalette me={{ id: actor.userId, role: actor.role }} />
    </div>
  );
}
