"use client";
import { memo } from "react";
import { specForLine } from "@/lib/chemistry/parse-water";
import type { LineProblem } from "@/lib/commands/entry";
import { comboOf } from "@/lib/commands/keys";
import { useKeycaps } from "@/lib/commands/use-keycaps";
import type { LineCompletion, ReadLine } from "@/lib/commands/read-line";
import { FormulaText } from "@/components/ui/formula-text";

/** The line under the prompt: faults with what to write instead, else what Tab offers, else how the line will be taken. */
export const PromptStatus = memo(function PromptStatus({ id, text, read, problems, isChecked, completion }: {
  id: string; text: string; read: ReadLine; problems: readonly LineProblem[]; isChecked: boolean; completion: LineCompletion;
}) {
  return (
    <div id={id} className="min-h-5 pl-5 text-xs leading-5 text-dim">
      {problems.length > 0 ? (
        <ul role={isChecked ? "alert" : undefined}>
          {problems.slice(0, 4).map((problem, index) => (
            <li key={index}>
              <span className="text-bad">{text.slice(problem.start, problem.end) || "Here"}</span>
              {" — "}{problem.message}
              {problem.suggestion && <> Tab writes <span className="text-ink"><FormulaText>{problem.suggestion}</FormulaText></span>.</>}
            </li>
          ))}
          {problems.length > 4 && <li>and {problems.length - 4} more</li>}
        </ul>
      ) : text === "" ? <Idle />
        : completion.options.length > 0 && completion.to > completion.from ? <Offers completion={completion} />
          : <Taken read={read} completion={completion} />}
    </div>
  );
});

function Idle() {
  const [mod, key] = useKeycaps(comboOf("palette"));
  return <p>Enter solves · Tab completes · ↑ earlier lines · ? keys · {mod} {key} everything</p>;
}

function Offers({ completion }: { completion: LineCompletion }) {
  const shown = completion.options.slice(0, 6);
  return (
    <p className="truncate">
      Tab: {shown.map((option, index) => (
        <span key={option.insert + index}>{index > 0 && " · "}<span className="text-ink"><FormulaText>{option.insert}</FormulaText></span>{shown.length === 1 && option.detail && ` — ${option.detail}`}</span>
      ))}
      {completion.options.length > shown.length && ` · ${completion.options.length - shown.length} more`}
    </p>
  );
}

function Taken({ read, completion }: { read: ReadLine; completion: LineCompletion }) {
  if (read.kind === "command") return <p className="truncate">{completion.options.length > 0 ? <>Tab offers {completion.options.length} words. </> : null}{read.command.help}</p>;
  if (read.kind !== "water") return null;
  return <p><FormulaText>{describeClosing(read)}</FormulaText></p>;
}

/** "Settled by pH and alkalinity; 8.4 °C", from the very spec that Enter will send. */
function describeClosing(read: Extract<ReadLine, { kind: "water" }>): string {
  const [each] = specForLine(read.water).cases;
  const facts = (each.close as readonly (string | { saturated: string })[] | undefined)?.map((fact) => (typeof fact === "string" ? (fact === "charge" ? "the balance of charges" : fact) : `saturation with ${fact.saturated}`));
  return facts ? `Enter solves it, settled by ${facts.join(" and ")}.` : "Enter solves it.";
}
