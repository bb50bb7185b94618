"use client";
import dynamic from "next/dynamic";
import { useRouter } from "next/navigation";
import { useCallback, useEffect, useMemo, useRef, useState, type RefObject } from "react";
import { countRows } from "@/lib/chemistry/resolve-job";
import { listSampleSets, submitJob } from "@/lib/client/api";
import { ApiError } from "@/lib/client/errors";
import { keepDraft, loadDraft } from "@/lib/commands/stream-memory";
import type { Issue } from "@/lib/errors";
import type { Me, SampleSet } from "@/lib/schemas/api";
import type { JobSpec } from "@/lib/schemas/job-spec";
import type { EditorHandle } from "./json-editor";
import { faultsOf } from "./language-support";
import { SpecSidebar } from "./spec-sidebar";
import { layOut, TEMPLATES } from "./templates";
import { useDryRun } from "./use-dry-run";

const JsonEditor = dynamic(() => import("./json-editor"), { ssr: false, loading: () => <p className="p-4 text-sm text-dim">Opening the editor …</p> });

/** Waters of a spec as far as the browser knows: its own rows, or the named set's count. */
function waterCountOf(spec: JobSpec, sets: readonly SampleSet[]): number | null {
  const waters = spec.waters as { rows?: unknown[]; set?: string };
  if (waters.rows) return waters.rows.length;
  const [id] = (waters.set ?? "").split("@");
  return sets.find((set) => set.id === id)?.waterCount ?? null;
}

/** Sends the document, or goes to its first fault. What the server finds is shown at its places like any other fault. */
function useSubmit({ faults, editor, say, onRefused }: {
  faults: ReturnType<typeof faultsOf>; editor: RefObject<EditorHandle | null>; say: (text: string) => void; onRefused: (issues: readonly Issue[]) => void;
}) {
  const router = useRouter();
  const [isSending, setSending] = useState(false);
  const send = async (): Promise<void> => {
    if (isSending) return;
    const first = faults.issues[0];
    if (faults.syntax) { editor.current?.showOffset(faults.syntax.at); say(`Not sent. ${faults.syntax.message}`); return; }
    if (first) { editor.current?.showPlace(first.pointer); say(`Not sent: ${faults.issues.length} ${faults.issues.length === 1 ? "fault" : "faults"}. ${first.message}`); return; }
    setSending(true);
    say("Submitting …");
    try {
      const job = await submitJob(faults.document as JobSpec);
      router.push(`/jobs/${job.id}`);
    } catch (error) {
      setSending(false);
      const issues = error instanceof ApiError ? error.errors ?? [] : [];
      onRefused(issues);
      if (issues[0]) editor.current?.showPlace(issues[0].pointer);
      say(`Not taken. ${error instanceof Error ? error.message : ""}`);
    }
  };
  return { submit: () => void send(), isSending };
}

/** The spec editor: the document, what it would do, and the sending of it. */
export function SpecEditor({ me }: { me: Pick<Me, "id"> }) {
  const [text, setText] = useState<string | null>(null);
  const [sets, setSets] = useState<SampleSet[]>([]);
  const [serverIssues, setServerIssues] = useState<readonly Issue[]>([]);
  const [said, setSaid] = useState("");
  const editor = useRef<EditorHandle | null>(null);

  useEffect(() => {
    setText(loadDraft(localStorage, me.id) ?? layOut(TEMPLATES[1].make(null)) + "\n");
    void listSampleSets({ limit: 200 }).then(({ sampleSets }) => setSets(sampleSets), () => {});
  }, [me.id]);

  const faults = useMemo(() => faultsOf(text ?? "null"), [text]);
  const isSound = faults.spec !== null && faults.issues.length === 0;
  const dryRun = useDryRun(isSound ? faults.spec : null);
  const rows = useMemo(() => {
    if (!faults.spec) return null;
    const waters = waterCountOf(faults.spec, sets);
    return waters === null ? dryRun.rowCount : countRows(faults.spec, waters);
  }, [faults.spec, sets, dryRun.rowCount]);

  const onChange = useCallback((value: string) => {
    setText(value);
    setServerIssues([]);
    keepDraft(localStorage, me.id, value);
  }, [me.id]);

  const format = useCallback(() => {
    if (text === null) return;
    try {
      onChange(layOut(JSON.parse(text)) + "\n");
      setSaid("Laid out afresh.");
    } catch {
      setSaid("Not laid out: the text is not JSON yet.");
    }
  }, [onChange, text]);

  const { submit, isSending } = useSubmit({ faults, editor, say: setSaid, onRefused: setServerIssues });

  const names = useMemo(() => ({ sets }), [sets]);
  return (
    <div className="flex h-full min-h-0 flex-col lg:flex-row">
      <section aria-label="Spec" className="flex min-h-[26rem] min-w-0 flex-1 flex-col lg:min-h-0">
        <div className="min-h-0 flex-1 overflow-hidden border-2 border-transparent focus-within:border-accent">
          {text !== null && (
            <JsonEditor text={text} names={names} serverIssues={serverIssues} onChange={onChange} onFormat={format} onSubmit={submit}
              onReady={(handle) => { editor.current = handle; handle.focus(); }} />
          )}
        </div>
        <p className="border-t border-line px-3 py-1 text-xs text-dim">Ctrl Space suggests · hover explains · Esc then Tab leaves the editor</p>
      </section>
      <SpecSidebar faults={faults} serverIssues={serverIssues} rows={rows} dryRun={dryRun} sets={sets} isSending={isSending} said={said}
        onShow={(pointer) => editor.current?.showPlace(pointer)} onShowOffset={(offset) => editor.current?.showOffset(offset)}
        onFormat={format} onSubmit={submit}
        onTemplate={(template, set) => { onChange(layOut(template.make(set)) + "\n"); editor.current?.focus(); }} />
    </div>
  );
}
