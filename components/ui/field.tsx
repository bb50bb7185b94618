"use client";
import { useId, type InputHTMLAttributes, type ReactNode, type Ref } from "react";

/** A labelled input with a hint and a fault of its own, both told to screen readers. */
export function Field({ label, hint, error, inputRef, className = "", ...rest }: InputHTMLAttributes<HTMLInputElement> & { label: string; hint?: ReactNode; error?: string; inputRef?: Ref<HTMLInputElement> }) {
  const id = useId();
  return (
    <div className={`flex flex-col gap-1 text-sm ${className}`}>
      <label htmlFor={id} className="text-dim">{label}</label>
      <input id={id} ref={inputRef} aria-invalid={error ? true : undefined} aria-describedby={`${id}-hint ${id}-error`} {...rest}
        className="min-h-9 w-full min-w-0 rounded border border-faint/75 bg-raised px-2 text-ink placeholder:text-faint aria-[invalid=true]:border-bad" />
      {hint && <p id={`${id}-hint`} className="text-xs text-dim">{hint}</p>}
      <p id={`${id}-error`} role="alert" className={error ? "text-xs text-bad" : "sr-only"}>{error}</p>
    </div>
  );
}
