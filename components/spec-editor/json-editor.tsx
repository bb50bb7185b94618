"use client";
import { json } from "@codemirror/lang-json";
import { forceLinting } from "@codemirror/lint";
import { Prec } from "@codemirror/state";
import { EditorView, keymap } from "@codemirror/view";
import CodeMirror from "@uiw/react-codemirror";
import { useEffect, useMemo, useRef } from "react";
import { comboOf } from "@/lib/commands/keys";
import type { Issue } from "@/lib/errors";
import { editorLook } from "./editor-theme";
import { rangeOfPointer } from "./json-places";
import { specLanguage, type KnownNames } from "./language-support";

export interface EditorHandle {
  /** Puts the caret at the place a pointer names, and the focus into the editor. */
  showPlace(pointer: string): void;
  showOffset(offset: number): void;
  focus(): void;
}

interface JsonEditorProps {
  text: string;
  names: KnownNames;
  serverIssues: readonly Issue[];
  onChange(text: string): void;
  onFormat(): void;
  onSubmit(): void;
  onReady(handle: EditorHandle): void;
}

/** The key of an editor action as CodeMirror writes it: "Mod-Shift-f". */
const comboFor = (id: "format" | "submit-spec"): string => {
  const parts = comboOf(id).split("+");
  const key = parts.pop()!;
  return [...parts, key.length === 1 ? key.toLowerCase() : key].join("-");
};

function handleFor(view: EditorView): EditorHandle {
  const show = (from: number, to: number): void => {
    view.dispatch({ selection: { anchor: from, head: to }, effects: EditorView.scrollIntoView(from, { y: "center" }) });
    view.focus();
  };
  return {
    showPlace: (pointer) => { const { from, to } = rangeOfPointer(view.state, pointer); show(from, to); },
    showOffset: (offset) => { const at = Math.min(offset, view.state.doc.length); show(at, at); },
    focus: () => view.focus(),
  };
}

/** CodeMirror for job specs. Loaded by itself: it is the largest piece of the page. */
export default function JsonEditor(props: JsonEditorProps) {
  // Extensions are made once; what changes is read through this, so that typing never rebuilds the editor.
  const latest = useRef(props);
  latest.current = props;
  const view = useRef<EditorView | null>(null);
  const extensions = useMemo(() => [
    json(), editorLook, EditorView.lineWrapping,
    EditorView.contentAttributes.of({ "aria-label": "Job spec, JSON. Escape then Tab leaves the editor.", spellcheck: "false" }),
    specLanguage(() => latest.current.names, () => latest.current.serverIssues),
    Prec.highest(keymap.of([
      { key: comboFor("format"), run: () => { latest.current.onFormat(); return true; } },
      { key: comboFor("submit-spec"), run: () => { latest.current.onSubmit(); return true; } },
    ])),
  ], []);
  useEffect(() => { if (view.current) forceLinting(view.current); }, [props.serverIssues]);
  return (
    <CodeMirror value={props.text} onChange={props.onChange} extensions={extensions} theme="none" height="100%" className="h-full"
      onCreateEditor={(made) => { view.current = made; props.onReady(handleFor(made)); }}
      basicSetup={{ autocompletion: false, lintKeymap: true, searchKeymap: true, highlightSelectionMatches: false, foldGutter: true, tabSize: 2 }} />
  );
}
