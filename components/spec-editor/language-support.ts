/** Completion, hover help and lint of job specs: three small sources over the JSON Schema and the one checker. */
import { autocompletion, type Completion, type CompletionContext, type CompletionResult, snippet } from "@codemirror/autocomplete";
import { type Diagnostic, linter, lintGutter } from "@codemirror/lint";
import type { Extension } from "@codemirror/state";
import { hoverTooltip, type EditorView } from "@codemirror/view";
import { checkSpec } from "@/lib/chemistry/check-spec";
import type { Issue } from "@/lib/errors";
import { jobSpecJsonSchema } from "@/lib/schemas/job-spec";
import { rangeOfPointer, spotAt } from "./json-places";
import { keysAt, schemasAt, skeletonFor, typeLine, valuesAt, type Schema } from "./schema-walk";

let built: Schema | undefined;
/** The job spec's schema, made once. */
export const specSchema = (): Schema => (built ??= jobSpecJsonSchema() as Schema);

/** Names a place can take that the schema cannot know: the stored sample sets, the document's own cases. */
export interface KnownNames { sets: readonly { id: string; name: string }[] }

function keyCompletions(path: readonly string[], siblings: readonly string[], hasColon: boolean): Completion[] {
  const root = specSchema();
  return keysAt(root, path).filter((option) => !siblings.includes(option.name)).map((option) => ({
    label: JSON.stringify(option.name), type: "property", boost: option.isRequired ? 2 : 0,
    detail: option.isRequired ? "required" : undefined, info: option.schema.description ?? schemasAt(root, [...path, option.name])[0]?.description,
    apply: hasColon ? JSON.stringify(option.name) : snippet(`${JSON.stringify(option.name)}: ${skeletonFor(option.schema, root)}`),
  }));
}

function valueCompletions(path: readonly string[], names: KnownNames, caseNames: readonly string[]): Completion[] {
  const options: Completion[] = valuesAt(specSchema(), path).map(({ value, detail }) => ({ label: JSON.stringify(value), detail: detail || undefined, type: "constant" }));
  if (path.join("/") === "waters/set") for (const set of names.sets) options.unshift({ label: JSON.stringify(set.id), detail: set.name, type: "constant", boost: 5 });
  if (path[0] === "cases" && path[2] === "like") for (const name of caseNames) options.unshift({ label: JSON.stringify(name), type: "constant", boost: 5 });
  return options;
}

function caseNamesOf(text: string): string[] {
  return [...text.matchAll(/"name"\s*:\s*("(?:[^"\\]|\\.)*")/g)].map((match) => JSON.parse(match[1]) as string);
}

const completionSource = (names: () => KnownNames) => (context: CompletionContext): CompletionResult | null => {
  const spot = spotAt(context.state, context.pos);
  if (!spot) return null;
  const isTyping = context.state.sliceDoc(spot.from, context.pos).length > 0;
  const before = context.state.sliceDoc(Math.max(0, context.pos - 2), context.pos);
  if (!context.explicit && !isTyping && !/[{:[,]\s?$/.test(before)) return null;
  const options = spot.at === "key" ? keyCompletions(spot.path, spot.siblings, spot.hasColon)
    : valueCompletions(spot.path, names(), caseNamesOf(context.state.doc.toString()));
  if (options.length === 0) return null;
  return { from: spot.from, to: Math.max(spot.to, context.pos), options, filter: true, validFor: /^"?[^",:{}[\]]*"?$/ };
};

const hoverSource = hoverTooltip((view, pos) => {
  const spot = spotAt(view.state, pos);
  if (!spot || spot.to <= spot.from) return null;
  const word = view.state.sliceDoc(spot.from, spot.to).replace(/^"|"$/g, "");
  const path = spot.at === "key" ? [...spot.path, word] : spot.path;
  const schemas = schemasAt(specSchema(), path);
  if (schemas.length === 0) return null;
  return {
    pos: spot.from, end: spot.to, above: true,
    create: () => {
      const dom = document.createElement("div");
      dom.className = "cm-spec-help";
      const description = schemas.find((each) => each.description)?.description;
      for (const [tag, text] of [["code", "/" + path.join("/")], ["p", description ?? ""], ["small", typeLine(schemas)]] as const) {
        if (!text) continue;
        const part = document.createElement(tag);
        part.textContent = text;
        dom.append(part);
      }
      return { dom };
    },
  };
});

/** Faults of the text, and of the document it spells. `null` document: the text is no JSON yet. */
export function faultsOf(text: string): { document: unknown; issues: Issue[]; syntax: { at: number; message: string } | null; spec: ReturnType<typeof checkSpec>["spec"] } {
  let document: unknown;
  try {
    document = JSON.parse(text);
  } catch (error) {
    const message = error instanceof Error ? error.message : "This is not JSON.";
    const position = /position (\d+)/.exec(message);
    return { document: null, issues: [], spec: null, syntax: { at: position ? Number(position[1]) : text.length, message: readable(message) } };
  }
  const { spec, issues } = checkSpec(document);
  return { document, issues, spec, syntax: null };
}

/** The browser's message without its echo of the whole text. */
const readable = (message: string): string => {
  const core = message.replace(/^JSON\.parse: /, "").replace(/,? \.{0,3}"[\s\S]*?"\.{0,3} is not valid JSON.*$/, "").replace(/ in JSON at position .*$/, "").replace(/ \(line .*$/, "");
  return /end of (JSON|data)/i.test(core) ? "The document is not finished: a bracket, brace or quote is still open." : `Not JSON from here on: ${core}.`;
};

export function diagnosticsOf(view: EditorView, issues: readonly Issue[], source: string): Diagnostic[] {
  return issues.map((issue) => {
    const range = rangeOfPointer(view.state, issue.pointer, /unknown|key/.test(issue.code));
    return { ...range, severity: "error" as const, source, message: [issue.message, issue.remedy].filter(Boolean).join(" ") };
  });
}

const lintSource = (serverIssues: () => readonly Issue[]) => (view: EditorView): Diagnostic[] => {
  const { issues, syntax } = faultsOf(view.state.doc.toString());
  if (syntax) {
    const at = Math.min(syntax.at, view.state.doc.length);
    return [{ from: Math.max(0, at - (at === view.state.doc.length ? 1 : 0)), to: Math.min(view.state.doc.length, at + 1), severity: "error", message: syntax.message }];
  }
  const seen = new Set(issues.map((issue) => issue.pointer + issue.message));
  const extra = serverIssues().filter((issue) => !seen.has(issue.pointer + issue.message));
  return [...diagnosticsOf(view, issues, "spec"), ...diagnosticsOf(view, extra, "server")];
};

/** All three as one extension. The functions are asked at use, so that later names and answers count. */
export function specLanguage(names: () => KnownNames, serverIssues: () => readonly Issue[]): Extension {
  return [
    autocompletion({ override: [completionSource(names)], activateOnTyping: true, icons: false }),
    hoverSource, linter(lintSource(serverIssues), { delay: 200 }), lintGutter(),
  ];
}
