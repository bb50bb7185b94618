"use client";
import Link from "next/link";
import { usePathname } from "next/navigation";
import { useEffect, useRef } from "react";
import { KeycapRow } from "@/components/ui/keycaps";
import { Wordmark } from "@/components/ui/wordmark";
import { PAGES } from "@/lib/commands/catalog/screen";
import { comboOf } from "@/lib/commands/keys";
import { useKeycaps } from "@/lib/commands/use-keycaps";
import type { Role } from "@/lib/schemas/actor";

/** Pages that stand in the bar; the palette has the rest. */
const SHOWN = ["console", "editor", "jobs", "samples", "constants", "tokens", "people"];
const SHORT: Record<string, string> = { console: "Console", editor: "Editor", jobs: "Jobs", samples: "Samples", constants: "Constants", tokens: "Tokens", people: "People" };

function isHere(path: string, here: string): boolean {
  return path === "/" ? here === "/" : here === path || here.startsWith(`${path}/`);
}

/** Head of every signed-in page: where one is, where one can go, and the palette. */
export function TopBar({ name, role }: { name: string; role: Role }) {
  const here = usePathname();
  const caps = useKeycaps(comboOf("palette"));
  const list = useRef<HTMLUListElement>(null);
  // On a narrow screen the bar scrolls: the page one is on stands in sight.
  useEffect(() => { list.current?.querySelector("[aria-current]")?.scrollIntoView({ inline: "nearest", block: "nearest" }); }, [here]);
  const pages = PAGES.filter((page) => SHOWN.includes(page.word) && (!page.role || page.role === role));
  return (
    <header className="flex items-center gap-x-4 border-b border-line bg-raised px-4 text-sm print:hidden max-sm:flex-wrap max-sm:gap-y-0">
      <Link href="/" className="flex min-h-10 items-center" aria-label="Tufa, the console"><Wordmark /></Link>
      <nav aria-label="Pages" className="min-w-0 flex-1 overflow-x-auto max-sm:order-last max-sm:-mx-4 max-sm:basis-full max-sm:border-t max-sm:border-line max-sm:px-4">
        <ul ref={list} className="flex gap-x-1">
          {pages.map((page) => (
            <li key={page.path}>
              <Link href={page.path} aria-current={isHere(page.path, here) ? "page" : undefined}
                className="flex min-h-10 items-center whitespace-nowrap border-b-2 border-transparent px-2 text-dim hover:text-ink aria-[current=page]:border-accent aria-[current=page]:text-ink">
                {SHORT[page.word] ?? page.title}
              </Link>
            </li>
          ))}
        </ul>
      </nav>
      <button type="button" onClick={() => window.dispatchEvent(new CustomEvent("tufa:open-palette"))}
        className="ml-auto flex min-h-8 items-center whitespace-nowrap rounded border border-line px-2 text-xs text-dim hover:text-ink">
        Find<KeycapRow caps={caps} />
      </button>
      <Link href="/account" aria-current={here === "/account" ? "page" : undefined} className="flex min-h-10 max-w-40 items-center truncate text-dim hover:text-ink aria-[current=page]:text-ink">{name}</Link>
    </header>
  );
}
