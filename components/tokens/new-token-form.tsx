"use client";
import { useState, type FormEvent } from "react";
import { Button } from "@/components/ui/button";
import { Field } from "@/components/ui/field";
import { SelectField } from "@/components/ui/select-field";
import { createToken } from "@/lib/client/accounts";
import type { Scope } from "@/lib/schemas/actor";
import type { TokenCreated } from "@/lib/schemas/api";

const SAYS: Record<Scope, string> = {
  "jobs:read": "read jobs and results", "jobs:write": "solve, submit, cancel", "samples:read": "read sample sets", "samples:write": "upload and delete sample sets", "admin": "people, everyone’s tokens, audit trail",
};
const DAYS = [30, 90, 180, 365] as const;
const DAY_MS = 86_400_000;

/** A day of the reader's calendar as a date field writes it. */
const dayText = (at: number): string => { const day = new Date(at); return [day.getFullYear(), day.getMonth() + 1, day.getDate()].map((part) => String(part).padStart(2, "0")).join("-"); };

/** When the token ends; null for never. */
function expiryOf(life: string, day: string): string | null {
  if (life === "never") return null;
  // To the end of the chosen day, in the reader's own time.
  if (life === "date") return new Date(`${day}T23:59:59`).toISOString();
  // A minute short of the day: the server counts to the second, and a year is its limit.
  return new Date(Date.now() + Number(life) * DAY_MS - 60_000).toISOString();
}

/** Name, scopes and life of a new token. All but the administrator's scope are ticked. */
export function NewTokenForm({ scopes, onMade }: { scopes: readonly Scope[]; onMade: (token: TokenCreated) => void }) {
  const [name, setName] = useState("");
  const [chosen, setChosen] = useState<readonly Scope[]>(scopes.filter((scope) => scope !== "admin"));
  const [life, setLife] = useState("90");
  const [day, setDay] = useState("");
  // A day less than a year: the last day counts to its end.
  const [days] = useState(() => { const now = Date.now(); return { first: dayText(now), last: dayText(now + 364 * DAY_MS) }; });
  const [isBusy, setBusy] = useState(false);
  const [failure, setFailure] = useState("");
  const onSubmit = (event: FormEvent): void => {
    event.preventDefault();
    if (chosen.length === 0) { setFailure("Choose at least one scope."); return; }
    setBusy(true);
    setFailure("");
    createToken({ name: name.trim(), scopes: [...chosen], expiresAt: expiryOf(life, day) }).then((token) => { setName(""); onMade(token); }, (error: unknown) => setFailure(error instanceof Error ? error.message : "The token was not made.")).finally(() => setBusy(false));
  };
  return (
    <form onSubmit={onSubmit} className="flex flex-col gap-3">
      <div className="flex flex-wrap items-start gap-4">
        <Field label="Name" required maxLength={80} value={name} onChange={(event) => setName(event.target.value)} placeholder="nightly batch" className="w-72 max-w-full" />
        <SelectField label="Expires" value={life} onChange={(event) => setLife(event.target.value)}>{DAYS.map((each) => <option key={each} value={each}>in {each} days</option>)}<option value="date">on a date</option><option value="never">never</option></SelectField>
        {life === "date" && <Field label="Last day" type="date" required min={days.first} max={days.last} value={day} onChange={(event) => setDay(event.target.value)} />}
      </div>
      <fieldset className="flex flex-col text-sm">
        <legend className="mb-1 text-dim">It may</legend>
        {scopes.map((scope) => (
          <label key={scope} className="flex min-h-7 items-center gap-2">
            <input type="checkbox" checked={chosen.includes(scope)} onChange={(event) => setChosen(event.target.checked ? [...chosen, scope] : chosen.filter((each) => each !== scope))} />
            <code>{scope}</code> <span className="text-dim">{SAYS[scope]}</span>
          </label>
        ))}
      </fieldset>
      {failure && <p role="alert" className="text-sm text-bad">{failure}</p>}
      <div><Button type="submit" kind="primary" disabled={isBusy}>Make the token</Button></div>
    </form>
  );
}
