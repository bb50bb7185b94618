"use client";
import { Command } from "cmdk";
import { useRouter } from "next/navigation";
import { useCallback, useEffect, useMemo, useRef, useState, type KeyboardEvent } from "react";
import { isKey, matchesCombo, onApple } from "@/lib/commands/keys";
import { paletteItems, rankItems, type PaletteGroup, type PaletteItem } from "@/lib/commands/palette-items";
import { COMMANDS, findCommand } from "@/lib/commands/registry";
import { loadRecent, rememberUse, type RecentUse } from "@/lib/commands/stream-memory";
import { listJobs, listSampleSets } from "@/lib/client/api";
import type { Job, Me, SampleSet } from "@/lib/schemas/api";
import { toConsole } from "./console-bridge";
import { runAnywhere } from "./run-anywhere";
import { FormulaText } from "@/components/ui/formula-text";
import { Keycaps } from "./keycaps";
import { useHonestHighlight } from "./use-honest-highlight";

const GROUPS: readonly PaletteGroup[] = ["Commands", "Pages", "Jobs", "Sample sets", "Constants"];

/** Items by group, the group with the best item first, so that the first row is the best answer. */
function grouped(items: readonly PaletteItem[]): [PaletteGroup, PaletteItem[]][] {
  const groups = new Map<PaletteGroup, PaletteItem[]>();
  for (const item of items) groups.set(item.group, [...(groups.get(item.group) ?? []), item]);
  return items.length === 0 ? [] : [...groups].sort((a, b) => items.indexOf(a[1][0]) - items.indexOf(b[1][0]) || GROUPS.indexOf(a[0]) - GROUPS.indexOf(b[0]));
}

/** Ctrl/Cmd-K, the button in the page's head, and the keys that commands carry for every page. */
function usePaletteKeys(isOpen: boolean, open: () => void, close: () => void, navigate: (path: string) => void): void {
  const latest = useRef({ isOpen, open, close, navigate });
  useEffect(() => { latest.current = { isOpen, open, close, navigate }; });
  useEffect(() => {
    const onKeyDown = (event: globalThis.KeyboardEvent): void => {
      if (event.isComposing || event.defaultPrevented) return;
      const now = latest.current;
      if (isKey(event, "palette")) {
        event.preventDefault();
        return now.isOpen ? now.close() : now.open();
      }
      const command = COMMANDS.find((each) => each.key?.scope === "everywhere" && matchesCombo(event, each.key.combo, onApple()));
      if (!command) return;
      event.preventDefault();
      toConsole(command.name, true, now.navigate);
    };
    const onAsked = (): void => latest.current.open();
    window.addEventListener("keydown", onKeyDown);
    window.addEventListener("tufa:open-palette", onAsked);
    return () => {
      window.removeEventListener("keydown", onKeyDown);
      window.removeEventListener("tufa:open-palette", onAsked);
    };
  }, []);
}

function FoundList({ groups, typed, onTake }: { groups: readonly [PaletteGroup, PaletteItem[]][]; typed: string; onTake: (item: PaletteItem) => void }) {
  return (
    <Command.List label="Found" className="max-h-[min(26rem,60vh)] overflow-y-auto p-1">
      {groups.length === 0 && <p role="status" className="px-3 py-4 text-sm text-dim">Nothing fits “{typed}”.</p>}
      {groups.map(([group, each]) => (
        <Command.Group key={group} heading={group} className="[&_[cmdk-group-heading]]:px-3 [&_[cmdk-group-heading]]:py-1 [&_[cmdk-group-heading]]:text-xs [&_[cmdk-group-heading]]:text-dim">
          {each.map((item) => (
            <Command.Item key={item.id} value={item.id} onSelect={() => onTake(item)}
              className="flex min-h-8 cursor-default items-center justify-between gap-4 rounded px-3 py-1 text-sm text-ink data-[selected=true]:bg-select">
              <span className="min-w-0 truncate"><FormulaText>{item.title}</FormulaText></span>
              <span className="flex shrink-0 items-center text-xs text-dim">{item.detail}{item.combo && <Keycaps combo={item.combo} />}</span>
            </Command.Item>
          ))}
        </Command.Group>
      ))}
    </Command.List>
  );
}

/**
 * The palette, on every page. Ctrl/Cmd-K opens it; keys that commands carry for every page work here as well. What is
 * typed before it has painted is not lost: the field exists from the first frame and takes the focus at once.
 */
export function CommandPalette({ me }: { me: Pick<Me, "id" | "role"> }) {
  const router = useRouter();
  const [isOpen, setOpen] = useState(false);
  const [typed, setTyped] = useState("");
  const [value, setValue] = useState("");
  const [recent, setRecent] = useState<RecentUse>({});
  const [jobs, setJobs] = useState<Job[]>([]);
  const [sets, setSets] = useState<SampleSet[]>([]);
  const opener = useRef<Element | null>(null);
  const box = useRef<HTMLDivElement>(null);
  useHonestHighlight(box, isOpen);

  const open = useCallback(() => {
    opener.current = document.activeElement;
    setRecent(loadRecent(localStorage, me.id));
    setTyped("");
    setOpen(true);
    // Jobs and sets follow when they come; the palette does not wait for them.
    void Promise.all([listJobs({ limit: 100 }), listSampleSets({ limit: 100 })])
      .then(([jobPage, setPage]) => { setJobs(jobPage.jobs); setSets(setPage.sampleSets); }, () => {});
  }, [me.id]);
  const close = useCallback(() => {
    setOpen(false);
    if (opener.current instanceof HTMLElement && opener.current.isConnected) opener.current.focus();
  }, []);

  const items = useMemo(() => paletteItems(me, jobs, sets), [me, jobs, sets]);
  // eslint-disable-next-line react-hooks/purity -- what was used lately ranks by its age now; minutes make no difference
  const ranked = useMemo(() => rankItems(items, typed, recent, Date.now()), [items, typed, recent]);
  const groups = useMemo(() => grouped(ranked), [ranked]);
  useEffect(() => { setValue(groups[0]?.[1][0].id ?? ""); }, [groups]);

  const take = useCallback((item: PaletteItem) => {
    setRecent(rememberUse(localStorage, me.id, recent, item.id, Date.now()));
    close();
    if ("go" in item.act) router.push(item.act.go);
    else if (item.act.isWhole && findCommand(item.act.line.split(" ")[0])?.worksAnywhere) void runAnywhere(item.act.line, me.role, (path) => router.push(path));
    else toConsole(item.act.line, item.act.isWhole, (path) => router.push(path));
  }, [close, me.id, me.role, recent, router]);

  usePaletteKeys(isOpen, open, close, (path) => router.push(path));

  const onKeyDown = (event: KeyboardEvent): void => {
    if (event.key === "Escape") { event.preventDefault(); event.stopPropagation(); close(); }
    // Home and End move the caret in the words typed, not the selection in the list.
    if (event.key === "Home" || event.key === "End") event.stopPropagation();
    // The field is the only stop: Tab must not leave an open dialog.
    if (event.key === "Tab") event.preventDefault();
  };

  if (!isOpen) return null;
  return (
    <div className="fixed inset-0 z-50 bg-scrim" onMouseDown={(event) => { if (event.target === event.currentTarget) close(); }}>
      <div ref={box} role="dialog" aria-modal="true" aria-label="Palette" className="mx-auto mt-[10vh] w-[min(40rem,calc(100vw-1.5rem))] overflow-hidden rounded-lg border border-line bg-raised shadow-2xl">
        <Command label="Palette" shouldFilter={false} vimBindings={false} value={value} onValueChange={setValue} loop>
          <Command.Input autoFocus value={typed} onValueChange={setTyped} onKeyDown={onKeyDown} placeholder="Command, page, job, sample set, constant"
            className="w-full border-b border-line bg-transparent px-4 py-3 text-base text-ink outline-none placeholder:text-faint" />
          <FoundList groups={groups} typed={typed} onTake={take} />
        </Command>
        <p className="border-t border-line px-4 py-1.5 text-xs text-dim">↑ ↓ choose · Enter does it · Esc closes</p>
      </div>
    </div>
  );
}
