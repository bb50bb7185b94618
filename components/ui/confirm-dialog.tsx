"use client";
import { useEffect, useId, useRef, type ReactNode } from "react";
import { Button } from "./button";

/** Asks before something that cannot be taken back. Escape and the first button do nothing. */
export function ConfirmDialog({ isOpen, title, children, action, onConfirm, onClose }: { isOpen: boolean; title: string; children?: ReactNode; action: string; onConfirm: () => void; onClose: () => void }) {
  const dialog = useRef<HTMLDialogElement>(null);
  const id = useId();
  useEffect(() => {
    const element = dialog.current;
    if (!element) return;
    if (isOpen && !element.open) element.showModal();
    if (!isOpen && element.open) element.close();
  }, [isOpen]);
  return (
    <dialog ref={dialog} onClose={onClose} onCancel={onClose} aria-labelledby={id} className="m-auto w-full max-w-md rounded border border-line bg-raised p-5 text-ink backdrop:bg-scrim">
      <h2 id={id} className="text-base font-semibold">{title}</h2>
      <div className="mt-2 text-sm text-dim">{children}</div>
      <div className="mt-5 flex justify-end gap-2">
        <Button onClick={onClose}>Keep it</Button>
        <Button kind="danger" onClick={() => { onConfirm(); onClose(); }}>{action}</Button>
      </div>
    </dialog>
  );
}
