"use client";
import Link from "next/link";
import { useEffect, useRef, useState, type FormEvent, type ReactNode } from "react";
import { Button } from "@/components/ui/button";
import { Field } from "@/components/ui/field";
import { setPassword } from "@/lib/client/accounts";
import { ApiError } from "@/lib/client/errors";

/** Spends a one-time link. The secret stands behind # in the address, where no server sees it, and is taken out at once. */
export function SetPasswordForm() {
  const [secret, setSecret] = useState<string | null>(null);
  const [password, setPasswordText] = useState("");
  const [again, setAgain] = useState("");
  const [error, setError] = useState("");
  const [doneFor, setDoneFor] = useState<string | null>(null);
  const onward = useRef<HTMLAnchorElement>(null);
  useEffect(() => { if (doneFor) onward.current?.focus(); }, [doneFor]);
  useEffect(() => {
    const found = location.hash.slice(1);
    setSecret(found);
    if (found) history.replaceState(null, "", location.pathname);
  }, []);
  const onSubmit = (event: FormEvent): void => {
    event.preventDefault();
    if (password !== again) { setError("The two are not the same."); return; }
    setError("");
    setPassword({ secret: secret ?? "", password }).then(({ email }) => setDoneFor(email), (reason: unknown) => {
      const [issue] = reason instanceof ApiError ? reason.errors ?? [] : [];
      setError(issue ? `${issue.message} ${issue.remedy ?? ""}` : reason instanceof Error ? reason.message : "The password was not set.");
    });
  };
  if (doneFor) return <Said><p role="status" className="text-sm">The password of {doneFor} is set. <Link href="/sign-in" ref={onward} className="text-accent underline underline-offset-4">Sign in</Link></p></Said>;
  if (secret === "") return <Said><p role="alert" className="text-sm text-bad">This address lacks its secret part. Open the whole link as it was given, or ask an administrator for a new one.</p></Said>;
  return (
    <form onSubmit={onSubmit} className="flex flex-col gap-4">
      <h1 className="text-base font-semibold">Set a password</h1>
      <Field label="New password" type="password" autoComplete="new-password" required autoFocus value={password} onChange={(event) => setPasswordText(event.target.value)} hint="8 characters or more; a few unrelated words, 15 characters together, are better." />
      <Field label="Once more" type="password" autoComplete="new-password" required value={again} onChange={(event) => setAgain(event.target.value)} error={error} />
      <Button type="submit" kind="primary">Set it</Button>
    </form>
  );
}

function Said({ children }: { children: ReactNode }) {
  return <div className="flex flex-col gap-4"><h1 className="text-base font-semibold">Set a password</h1>{children}</div>;
}
