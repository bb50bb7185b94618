import { HighlightStyle, syntaxHighlighting } from "@codemirror/language";
import { EditorView } from "@codemirror/view";
import { tags } from "@lezer/highlight";

/** The editor in the page's own colours, so that dark and light follow the theme without a second definition. */
const look = EditorView.theme({
  "&": { color: "var(--ink)", backgroundColor: "var(--sunken)", fontSize: "0.875rem", height: "100%" },
  // The frame around the editor shows the focus: the gutters would cover an outline here.
  "&.cm-focused": { outline: "none" },
  ".cm-content": { fontFamily: "inherit", caretColor: "var(--accent)", padding: "0.5rem 0" },
  ".cm-scroller": { fontFamily: "inherit", lineHeight: "1.55" },
  ".cm-cursor": { borderLeftColor: "var(--accent)", borderLeftWidth: "2px" },
  ".cm-gutters": { backgroundColor: "var(--sunken)", color: "var(--faint)", border: "none" },
  ".cm-activeLine, .cm-activeLineGutter": { backgroundColor: "color-mix(in srgb, var(--accent) 6%, transparent)" },
  "&.cm-focused .cm-selectionBackground, .cm-selectionBackground, ::selection": { backgroundColor: "var(--select) !important" },
  ".cm-matchingBracket": { backgroundColor: "var(--select)", outline: "none" },
  ".cm-tooltip": { backgroundColor: "var(--raised)", color: "var(--ink)", border: "1px solid var(--line)", borderRadius: "6px", maxWidth: "min(30rem, 90vw)" },
  ".cm-tooltip-autocomplete > ul": { fontFamily: "inherit" },
  ".cm-tooltip-autocomplete > ul > li[aria-selected]": { backgroundColor: "var(--select)", color: "var(--ink)" },
  ".cm-completionDetail": { color: "var(--dim)", fontStyle: "normal", marginLeft: "1em" },
  ".cm-completionMatchedText": { textDecoration: "none", color: "var(--accent)" },
  ".cm-completionInfo": { padding: "0.4rem 0.6rem", fontSize: "0.8rem" },
  ".cm-spec-help": { padding: "0.4rem 0.6rem", fontSize: "0.8rem", lineHeight: "1.45" },
  ".cm-spec-help code": { color: "var(--accent)" },
  ".cm-spec-help small": { color: "var(--dim)", fontSize: "0.75rem" },
  ".cm-diagnostic": { fontFamily: "inherit", fontSize: "0.8rem", whiteSpace: "pre-wrap" },
  ".cm-diagnostic-error": { borderLeftColor: "var(--bad)" },
  ".cm-lintRange-error": { backgroundImage: "none", textDecoration: "underline wavy var(--bad) 1px", textUnderlineOffset: "3px" },
});

const colours = HighlightStyle.define([
  { tag: tags.propertyName, color: "var(--accent)" },
  { tag: tags.string, color: "var(--ink)" },
  { tag: [tags.number, tags.bool, tags.null], color: "var(--water)" },
  { tag: [tags.separator, tags.squareBracket, tags.brace], color: "var(--dim)" },
]);

export const editorLook = [look, syntaxHighlighting(colours)];
