"use client";
import { useEffect, useRef } from "react";
import { Button } from "./button";
import { CopyButton } from "./copy-button";

/** A secret that is shown this once: selected, so that it can be copied at once. */
export function ShownOnce({ title, text, onClose }: { title: string; text: string; onClose: () => void }) {
  const input = useRef<HTMLInputElement>(null);
  const before = useRef<HTMLElement | null>(null);
  useEffect(() => {
    if (document.activeElement instanceof HTMLElement && document.activeElement !== input.current) before.current = document.activeElement;
    input.current?.focus();
    input.current?.select();
  }, [text]);
  const close = (): void => { onClose(); before.current?.focus(); };
  return (
    <div role="group" aria-label={title} className="flex flex-col gap-2 rounded border border-accent bg-raised p-4 text-sm">
      <p>{title}</p>
      <div className="flex flex-wrap gap-2">
        <input ref={input} readOnly value={text} aria-label={title} className="min-h-9 min-w-0 flex-1 basis-80 rounded border border-faint/75 bg-sunken px-2" />
        <CopyButton text={text} />
        <Button onClick={close}>I have it</Button>
      </div>
    </div>
  );
}
