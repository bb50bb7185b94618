"use client";
import { useRouter } from "next/navigation";
import { useId, useRef, useState, type DragEvent, type FormEvent } from "react";
import { Button } from "@/components/ui/button";
import { Field } from "@/components/ui/field";
import { IssueList, type ShownIssue } from "@/components/ui/issue-list";
import { Page } from "@/components/ui/page";
import { SelectField } from "@/components/ui/select-field";
import { ApiError } from "@/lib/client/errors";
import { uploadSamples } from "@/lib/client/samples";

const stemOf = (name: string): string => name.replace(/\.[^.]*$/, "").replaceAll(/[_-]+/g, " ");

/** Uploads a table of waters: a new set, or the next version of one. What was filled in stays when the file has faults. */
export function UploadForm({ set = null }: { set?: { id: string; name: string; version: number } | null }) {
  const router = useRouter();
  const id = useId();
  const input = useRef<HTMLInputElement>(null);
  const [file, setFile] = useState<File | null>(null);
  const [name, setName] = useState("");
  const [description, setDescription] = useState("");
  const [note, setNote] = useState("");
  const [visibility, setVisibility] = useState<"team" | "private">("team");
  const [isOver, setOver] = useState(false);
  const [isBusy, setBusy] = useState(false);
  const [failure, setFailure] = useState<{ message: string; issues: readonly ShownIssue[] } | null>(null);

  const take = (taken: File | undefined): void => {
    if (!taken) return;
    setFile(taken);
    setFailure(null);
    if (name === "") setName(stemOf(taken.name));
  };
  const onDrop = (event: DragEvent): void => { event.preventDefault(); setOver(false); take(event.dataTransfer.files[0]); };
  const onSubmit = (event: FormEvent): void => {
    event.preventDefault();
    if (!file) { setFailure({ message: "Choose a file first.", issues: [] }); input.current?.focus(); return; }
    setBusy(true);
    setFailure(null);
    uploadSamples({ name, description, visibility, note, file }, set?.id ?? null).then((made) => router.push(`/samples/${made.id}`), (error: unknown) => {
      setBusy(false);
      setFailure({ message: error instanceof Error ? error.message : "The upload failed.", issues: error instanceof ApiError ? error.errors ?? [] : [] });
    });
  };

  return (
    <Page title={set ? `Version ${set.version + 1} of ${set.name}` : "Upload samples"}
      lead="A CSV or JSON file with one row for each water. Headings such as id, site, date, temperature, pH, Ca (mg/L), NO3-N (mg/L), alkalinity (meq/L) are understood; comma, semicolon or tab apart; <0.05 for values below a limit.">
      <form onSubmit={onSubmit} className="flex max-w-2xl flex-col gap-4">
        <div onDragOver={(event) => { event.preventDefault(); setOver(true); }} onDragLeave={() => setOver(false)} onDrop={onDrop}
          className={`flex flex-col gap-2 rounded border border-dashed px-4 py-6 text-sm ${isOver ? "border-accent bg-select" : "border-line bg-raised"}`}>
          <label htmlFor={id} className="text-dim">File, chosen here or dropped</label>
          <input ref={input} id={id} type="file" accept=".csv,.txt,.tsv,.json,text/csv,application/json" onChange={(event) => take(event.target.files?.[0])}
            // Emptied first, so that the same file, mended, can be chosen again.
            onClick={(event) => { event.currentTarget.value = ""; }} className="max-w-full text-ink file:mr-3 file:min-h-8 file:rounded file:border file:border-line file:bg-page file:px-3 file:text-ink" />
          {file && <p className="text-dim">{file.name}, {Math.max(1, Math.round(file.size / 1024))} KiB</p>}
        </div>
        {!set && <Field label="Name" required maxLength={120} value={name} onChange={(event) => setName(event.target.value)} />}
        {!set && <Field label="Description" maxLength={2000} value={description} onChange={(event) => setDescription(event.target.value)} />}
        <Field label="Note on this version" maxLength={500} value={note} onChange={(event) => setNote(event.target.value)} />
        {!set && <SelectField label="Seen by" value={visibility} onChange={(event) => setVisibility(event.target.value as "team" | "private")} className="max-w-60"><option value="team">the team</option><option value="private">me alone</option></SelectField>}
        <div><Button type="submit" kind="primary" disabled={isBusy}>{isBusy ? "Uploading …" : "Upload"}</Button></div>
      </form>
      {failure && <div role="alert" className="flex flex-col gap-2"><p className="text-sm text-bad">{failure.message} Nothing was stored.</p>{failure.issues.length > 0 && <IssueList issues={failure.issues} />}</div>}
    </Page>
  );
}
