/** Between JSON Pointers and places in the text, by the editor's own syntax tree: it holds while the text is half typed. */
import { ensureSyntaxTree, syntaxTree } from "@codemirror/language";
import type { EditorState } from "@codemirror/state";
import type { SyntaxNode } from "@lezer/common";

export interface Range { from: number; to: number }

const VALUES = new Set(["Object", "Array", "String", "Number", "True", "False", "Null"]);
const isValue = (node: SyntaxNode): boolean => VALUES.has(node.name);

function children(node: SyntaxNode): SyntaxNode[] {
  const found: SyntaxNode[] = [];
  for (let child = node.firstChild; child; child = child.nextSibling) found.push(child);
  return found;
}

export const valueOfProperty = (property: SyntaxNode): SyntaxNode | null => children(property).find(isValue) ?? null;

/** The name of a property, unescaped. */
export function nameOfProperty(state: EditorState, property: SyntaxNode): string {
  const name = property.getChild("PropertyName");
  return name ? unquoted(state.sliceDoc(name.from, name.to)) : "";
}

export function unquoted(text: string): string {
  try {
    return String(JSON.parse(text));
  } catch {
    return text.replace(/^"|"$/g, "");
  }
}

const rootOf = (state: EditorState): SyntaxNode | null => {
  const tree = ensureSyntaxTree(state, state.doc.length, 200) ?? syntaxTree(state);
  return children(tree.topNode).find(isValue) ?? null;
};

/** Keys of a JSON Pointer (RFC 6901). */
export const pointerKeys = (pointer: string): string[] =>
  pointer === "" ? [] : pointer.split("/").slice(1).map((key) => key.replaceAll("~1", "/").replaceAll("~0", "~"));

/**
 * Where a pointer points. An unknown key is marked at its name, a faulty value at the value; where the last steps do not
 * exist (a missing key, say) the nearest object around them, at its opening brace alone.
 */
export function rangeOfPointer(state: EditorState, pointer: string, markKey = false): Range {
  let node = rootOf(state);
  if (!node) return { from: 0, to: state.doc.length };
  let property: SyntaxNode | null = null;
  for (const key of pointerKeys(pointer)) {
    const next: SyntaxNode | null = node.name === "Array"
      ? children(node).filter(isValue)[Number(key)] ?? null
      : children(node).find((child) => child.name === "Property" && nameOfProperty(state, child) === key) ?? null;
    if (!next) return headOf(node);
    property = next.name === "Property" ? next : null;
    const value: SyntaxNode | null = property ? valueOfProperty(property) : next;
    if (!value) return { from: next.from, to: next.to };
    node = value;
  }
  const name = property?.getChild("PropertyName");
  if (markKey && name) return { from: name.from, to: name.to };
  return node.name === "Object" || node.name === "Array" ? (name ? { from: name.from, to: name.to } : headOf(node)) : { from: node.from, to: node.to };
}

const headOf = (node: SyntaxNode): Range => (node.name === "Object" || node.name === "Array"
  ? { from: node.from, to: node.from + 1 } : { from: node.from, to: node.to });

export interface Spot {
  /** Keys from the root to the value (or to the object whose key is being written). */
  path: string[];
  /** Whether a key or a value stands at the place. */
  at: "key" | "value";
  /** The text that a completion replaces. */
  from: number;
  to: number;
  /** For keys: the names the object has already. */
  siblings: string[];
  /** For keys: true where the name is followed by its colon already. */
  hasColon: boolean;
}

/** What stands at a place of the text; null outside the document's value. */
export function spotAt(state: EditorState, pos: number): Spot | null {
  const tree = ensureSyntaxTree(state, pos, 100) ?? syntaxTree(state);
  let node: SyntaxNode | null = tree.resolveInner(pos, -1);
  if (node.name === "{" || node.name === "[" || node.name === "," || node.name === ":" || node.name === "⚠") node = node.parent ?? node;
  const token = tokenAround(state, pos);
  for (let each: SyntaxNode | null = node; each; each = each.parent) {
    if (each.name === "PropertyName") {
      const property = each.parent!;
      const object = property.parent!;
      return { path: pathOf(state, object), at: "key", from: each.from, to: each.to, siblings: siblingNames(state, object, property), hasColon: valueStart(state, property) !== null };
    }
    if (each.name === "Property") {
      const colon = valueStart(state, each);
      const value = valueOfProperty(each);
      if (colon !== null && pos >= colon) return { path: pathOf(state, each), at: "value", from: value?.from ?? token.from, to: value?.to ?? token.to, siblings: [], hasColon: false };
    }
    if (each.name === "Object") return { path: pathOf(state, each), at: "key", from: token.from, to: token.to, siblings: siblingNames(state, each, null), hasColon: false };
    if (each.name === "Array") {
      const index = children(each).filter((child) => isValue(child) && child.to < pos).length;
      const inside = children(each).find((child) => isValue(child) && child.from <= pos && pos <= child.to);
      return { path: [...pathOf(state, each), String(index)], at: "value", from: inside?.from ?? token.from, to: inside?.to ?? token.to, siblings: [], hasColon: false };
    }
  }
  return { path: [], at: "value", from: token.from, to: token.to, siblings: [], hasColon: false };
}

/** Place just behind a property's colon; null while there is none. */
function valueStart(state: EditorState, property: SyntaxNode): number | null {
  const name = property.getChild("PropertyName");
  if (!name) return null;
  const behind = state.sliceDoc(name.to, Math.min(property.to + 40, state.doc.length));
  const match = /^\s*:/.exec(behind);
  return match ? name.to + match[0].length : null;
}

/** The half-typed word at a place, quotes included. */
function tokenAround(state: EditorState, pos: number): Range {
  const line = state.doc.lineAt(pos);
  const before = /"?[^\s,:[\]{}"]*$/.exec(line.text.slice(0, pos - line.from))![0];
  const after = /^[^\s,:[\]{}"]*"?/.exec(line.text.slice(pos - line.from))![0];
  return { from: pos - before.length, to: pos + (before.startsWith("\"") ? after.length : after.replace(/"$/, "").length) };
}

const siblingNames = (state: EditorState, object: SyntaxNode, except: SyntaxNode | null): string[] =>
  children(object).filter((child) => child.name === "Property" && child.from !== except?.from).map((child) => nameOfProperty(state, child));

/** Keys from the root to a node. */
export function pathOf(state: EditorState, node: SyntaxNode): string[] {
  const path: string[] = [];
  for (let each: SyntaxNode | null = node; each; each = each.parent) {
    if (each.name === "Property") path.unshift(nameOfProperty(state, each));
    else if (each.parent?.name === "Array") {
      path.unshift(String(children(each.parent).filter(isValue).findIndex((child) => child.from === each.from)));
    }
  }
  return path;
}
