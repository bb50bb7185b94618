"use client";
import type { EntryBody } from "@/lib/commands/entry";

/** Code with a button that copies it. */
export function CodeAnswer({ body, onCopy }: { body: Extract<EntryBody, { kind: "code" }>; onCopy: (text: string) => void }) {
  return (
    <div className="space-y-1 text-sm">
      <div className="flex items-baseline justify-between gap-4">
        <p className="min-w-0 truncate text-xs text-dim">{body.caption}, in {body.language}; the token is read from TUFA_TOKEN</p>
        <button type="button" onClick={() => onCopy(body.text)} className="min-h-7 shrink-0 text-xs text-accent underline-offset-4 hover:underline">Copy</button>
      </div>
      <pre tabIndex={0} className="max-h-96 overflow-auto rounded-md border border-line bg-sunken p-3 text-xs leading-5">{body.text}</pre>
    </div>
  );
}
