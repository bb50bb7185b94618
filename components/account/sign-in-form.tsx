"use client";
import { signIn } from "next-auth/react";
import { useRef, useState, type FormEvent } from "react";
import { Button } from "@/components/ui/button";
import { Field } from "@/components/ui/field";
import { wantedAddress } from "@/lib/client/sign-in-address";

interface DemoAccount { name: string; email: string; role: string; password: string }

const REASONS: Record<string, string> = {
  credentials: "Address and password do not go together.",
  "rate-limited": "Too many attempts at this address. Wait a quarter of an hour, or ask an administrator for a new link.",
};

export function SignInForm({ demo }: { demo: readonly DemoAccount[] }) {
  const [email, setEmail] = useState("");
  const [password, setPassword] = useState("");
  const [error, setError] = useState("");
  const [isBusy, setBusy] = useState(false);
  const passwordInput = useRef<HTMLInputElement>(null);

  const enter = async (address: string, secret: string): Promise<void> => {
    setBusy(true);
    setError("");
    try {
      const result = await signIn("credentials", { email: address, password: secret, redirect: false });
      if (result?.ok && !result.error) { location.assign(wantedAddress(location.search, location.origin)); return; }
      setError(REASONS[result?.error ?? ""] ?? "Signing in failed; try again.");
    } catch {
      setError("The server does not answer; try again in a moment.");
    }
    setBusy(false);
    passwordInput.current?.select();
  };
  const onSubmit = (event: FormEvent): void => { event.preventDefault(); void enter(email, password); };

  return (
    <>
      <form onSubmit={onSubmit} className="flex flex-col gap-4" aria-label="Sign in">
        <h1 className="sr-only">Sign in</h1>
        <Field label="E-mail" type="email" autoComplete="username" required autoFocus value={email} onChange={(event) => setEmail(event.target.value)} />
        <Field label="Password" type="password" autoComplete="current-password" required value={password} inputRef={passwordInput} error={error}
          onChange={(event) => setPassword(event.target.value)} />
        <Button type="submit" kind="primary" disabled={isBusy}>{isBusy ? "Signing in …" : "Sign in"}</Button>
      </form>
      {demo.length > 0 && (
        <section aria-labelledby="demo" className="border-t border-line pt-4 text-sm">
          <h2 id="demo" className="text-dim">A demo over invented data. Come in as</h2>
          <ul className="mt-2 flex flex-col gap-1">
            {demo.map((person) => (
              <li key={person.email}>
                <button type="button" disabled={isBusy} onClick={() => { setEmail(person.email); setPassword(person.password); void enter(person.email, person.password); }}
                  className="flex min-h-9 w-full items-center justify-between gap-3 rounded px-2 text-left hover:bg-sunken">
                  <span>{person.name}</span><span className="text-dim">{person.role}</span>
                </button>
              </li>
            ))}
          </ul>
        </section>
      )}
    </>
  );
}
