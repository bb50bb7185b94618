"use client";
import { useId, type ReactNode, type SelectHTMLAttributes } from "react";

export function SelectField({ label, children, className = "", ...rest }: SelectHTMLAttributes<HTMLSelectElement> & { label: string; children: ReactNode }) {
  const id = useId();
  return (
    <div className={`flex flex-col gap-1 text-sm ${className}`}>
      <label htmlFor={id} className="text-dim">{label}</label>
      <select id={id} {...rest} className="min-h-9 rounded border border-faint/75 bg-raised px-2 text-ink">{children}</select>
    </div>
  );
}
