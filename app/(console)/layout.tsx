import type { ReactNode } from "react";
import { CommandPalette } from "@/components/console/command-palette";
import { QueryProvider } from "@/components/shell/query-provider";
import { TopBar } from "@/components/shell/top-bar";
import { pageActor } from "@/lib/http/page-auth";

export default async function ConsoleLayout({ children }: { children: ReactNode }) {
  const actor = await pageActor();
  // Each page guards itself and knows the way back to it, which a layout does not: nobody signed in, nothing around the redirect.
  if (!actor) return children;
  return (
    <div className="relative flex h-dvh min-h-0 flex-col overflow-hidden print:block print:h-auto print:overflow-visible">
      <a href="#main" className="sr-only focus:not-sr-only focus:absolute focus:left-2 focus:top-2 focus:z-50 focus:bg-raised focus:px-3 focus:py-2">Skip to the content</a>
      <TopBar name={actor.name} role={actor.role} />
      <main id="main" tabIndex={-1} className="relative min-h-0 flex-1 overflow-y-auto outline-none print:overflow-visible"><QueryProvider>{children}</QueryProvider></main>
      <CommandPalette me={{ id: actor.userId, role: actor.role }} />
    </div>
  );
}
