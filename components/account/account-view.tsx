"use client";
import { useEffect, useState, type ReactNode } from "react";
import { Button } from "@/components/ui/button";
import { Page, Section } from "@/components/ui/page";
import { leaveSession } from "@/lib/client/session";
import { chooseTheme, keptTheme, type Theme } from "@/lib/client/theme";
import { grouped } from "@/lib/commands/numbers";

const THEMES: readonly [Theme, string][] = [["dark", "dark"], ["light", "light"], ["system", "as the system has it"]];

export interface AccountFacts { name: string; email: string; role: string; scopes: readonly string[]; rowsPerJob: number; backlogRows: number; requestsPerMinute: number }

export function AccountView({ facts }: { facts: AccountFacts }) {
  const [theme, setTheme] = useState<Theme | null>(null);
  useEffect(() => setTheme(keptTheme()), []);
  return (
    <Page title="Your account" actions={<Button onClick={() => void leaveSession()}>Sign out</Button>}>
      <Section title="Who you are">
        <dl className="grid grid-cols-[max-content_1fr] gap-x-6 gap-y-1 text-sm">
          <Fact name="name">{facts.name}</Fact><Fact name="e-mail">{facts.email}</Fact><Fact name="role">{facts.role}</Fact>
          <Fact name="may">{facts.scopes.join(", ")}</Fact>
          <Fact name="rows of a job">up to {grouped(facts.rowsPerJob)}</Fact><Fact name="rows waiting">up to {grouped(facts.backlogRows)}</Fact><Fact name="requests">up to {grouped(facts.requestsPerMinute)} a minute</Fact>
        </dl>
        <p className="text-sm text-dim">Roles are given by an administrator; so is a new link for setting the password.</p>
      </Section>
      <Section title="Colours">
        <fieldset className="flex flex-wrap gap-x-6 gap-y-1 text-sm">
          <legend className="sr-only">Colours</legend>
          {THEMES.map(([each, says]) => (
            <label key={each} className="flex min-h-8 items-center gap-2"><input type="radio" name="theme" checked={theme === each} onChange={() => { chooseTheme(each); setTheme(each); }} />{says}</label>
          ))}
        </fieldset>
      </Section>
    </Page>
  );
}

function Fact({ name, children }: { name: string; children: ReactNode }) {
  return <><dt className="text-dim">{name}</dt><dd className="min-w-0 break-words">{children}</dd></>;
}
