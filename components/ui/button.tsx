import type { ButtonHTMLAttributes, Ref } from "react";

const LOOKS = {
  primary: "bg-accent text-on-accent border-accent hover:brightness-110",
  plain: "bg-raised text-ink border-line hover:bg-sunken",
  danger: "bg-raised text-bad border-bad hover:bg-sunken",
} as const;

export type ButtonKind = keyof typeof LOOKS;

export function Button({ kind = "plain", className = "", buttonRef, ...rest }: ButtonHTMLAttributes<HTMLButtonElement> & { kind?: ButtonKind; buttonRef?: Ref<HTMLButtonElement> }) {
  return (
    <button type="button" ref={buttonRef} {...rest}
      className={`inline-flex min-h-9 items-center justify-center gap-2 whitespace-nowrap rounded border px-3 text-sm disabled:opacity-60 print:hidden ${LOOKS[kind]} ${className}`} />
  );
}
