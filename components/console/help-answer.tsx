"use client";
import type { ConsoleView } from "@/lib/commands/command";
import { callAt } from "@/lib/commands/command";
import { KEYS } from "@/lib/commands/keys";
import { COMMANDS, findCommand } from "@/lib/commands/registry";
import { Keycaps } from "./keycaps";
import { FormulaText } from "@/components/ui/formula-text";

/** Commands and keys, from the same tables that run them; with a topic, that command at length. */
export function HelpAnswer({ topic, view, onTry }: { topic: string | null; view: ConsoleView; onTry: (line: string) => void }) {
  const command = topic ? findCommand(topic) : null;
  if (command) return <CommandHelp name={command.name} view={view} onTry={onTry} />;
  return (
    <div className="space-y-4 text-sm">
      <section>
        <h3 className="mb-1 text-xs text-dim">A water, the way you would dictate it</h3>
        <button type="button" onClick={() => onTry("Ca 62 mg/L, alkalinity 2.71 meq/L, pH 7.9, 8.4 °C")} className="min-h-7 text-left text-accent underline-offset-4 hover:underline">Ca 62 mg/L, alkalinity 2.71 meq/L, pH 7.9, 8.4 °C</button>
        <p className="text-xs leading-5 text-dim">Analytes with a number and a unit, in any order, with commas between. Entries are called #3, 3 or last.</p>
      </section>
      <section>
        <h3 className="mb-1 text-xs text-dim">Commands</h3>
        <dl className="grid gap-x-4 gap-y-1.5 sm:grid-cols-[auto_1fr]">
          {COMMANDS.map((each) => (
            <div key={each.name} className="contents">
              <dt className="whitespace-nowrap"><button type="button" onClick={() => onTry(each.example)} className="min-h-7 text-accent underline-offset-4 hover:underline" title={`Puts “${each.example}” into the prompt`}>{each.name}</button>{each.key && <Keycaps combo={each.key.combo} />}</dt>
              <dd className="pb-1 text-dim sm:pb-0">{each.help} <span className="text-faint">{each.name} {each.signature}</span></dd>
            </div>
          ))}
        </dl>
      </section>
      <section>
        <h3 className="mb-1 text-xs text-dim">Keys</h3>
        <dl className="grid gap-x-4 gap-y-1 sm:grid-cols-[auto_1fr]">
          {KEYS.map((key) => (
            <div key={key.id} className="contents">
              <dt className="whitespace-nowrap"><Keycaps combo={key.combo} /></dt>
              <dd className="text-dim">{key.does}{key.scope === "editor" && " (spec editor)"}</dd>
            </div>
          ))}
        </dl>
      </section>
    </div>
  );
}

function CommandHelp({ name, view, onTry }: { name: string; view: ConsoleView; onTry: (line: string) => void }) {
  const command = findCommand(name)!;
  const call = command.apiCall(callAt(command.example, command.name.length), view);
  return (
    <div className="space-y-2 text-sm">
      <p className="text-base"><span className="font-semibold text-accent">{command.name}</span> <span className="text-dim">{command.signature}</span>{command.key && <Keycaps combo={command.key.combo} />}</p>
      <p><FormulaText>{command.help}</FormulaText></p>
      <p className="text-dim">For example <button type="button" onClick={() => onTry(command.example)} className="min-h-7 text-accent underline-offset-4 hover:underline">{command.example}</button></p>
      <p className="text-xs text-dim">{call ? <>Over HTTP: <code className="text-ink">{call.method} {call.path}</code>; <button type="button" className="min-h-7 text-accent hover:underline" onClick={() => onTry(`api ${command.example}`)}>api {command.example}</button> shows it whole.</> : "Happens in this browser, or needs an entry first; there is no request for it now."}</p>
    </div>
  );
}
