/** Elements of a spec's own formulas: the known ones, and symbols that an analyte gives a molar mass. */
import { ATOMIC_MASSES, MORE_ATOMIC_MASSES } from "@/lib/chemistry/data/atomic-masses";
import { compositionOf } from "@/lib/chemistry/data/formula";
import { shorten } from "@/lib/chemistry/quantity";
import type { Issue } from "@/lib/errors";
import type { Extend } from "@/lib/schemas/extend";

export type Atoms = Record<string, number>;
export type ElementTable = Readonly<Record<string, number>>;

const bare = (name: string): string => name.replace(/\^\d*[+-]$/, "");

/** A lone unknown symbol with a molar mass, such as X of X^-, is an element from there on. */
export function elementTable(extend: Extend): ElementTable {
  const table: Record<string, number> = { ...MORE_ATOMIC_MASSES, ...ATOMIC_MASSES };
  for (const { species, formula, molarMass } of Object.values(extend.analytes ?? {})) {
    const symbol = formula ?? bare(species);
    if (molarMass !== undefined && /^[A-Z][a-z]?$/.test(symbol) && !Object.hasOwn(table, symbol)) table[symbol] = molarMass;
  }
  return table;
}

/** Atoms of a name, or of the formula given in its place; else the first element that is not known, "" where the text is no formula. */
export function readComposition(name: string, formula: string | undefined, elements: ElementTable): { atoms: Atoms } | { unknown: string } {
  const text = formula ?? name;
  const atoms = compositionOf(text, elements);
  if (atoms) return { atoms };
  const symbols = bare(text).match(/[A-Z][a-z]?/g) ?? [];
  return { unknown: symbols.find((symbol) => !Object.hasOwn(elements, symbol)) ?? "" };
}

export function atomProblems(unknown: string, text: string, isAnalyte: boolean): Pick<Issue, "code" | "message" | "remedy"> {
  if (unknown === "") return { code: "unreadable-formula", message: `“${shorten(text)}” is no formula.`, remedy: "Give \"formula\", such as C6H5O7." };
  return {
    code: "unknown-element", message: `“${unknown}” in “${shorten(text)}” is no known element.`,
    remedy: isAnalyte ? "Give \"molarMass\" where the symbol stands for the whole, or \"formula\"." : "Give \"formula\", or let an analyte bring the symbol with its molarMass.",
  };
}

export function massOf(atoms: Atoms, elements: ElementTable): number {
  return Object.entries(atoms).reduce((sum, [element, count]) => sum + count * (elements[element] ?? NaN), 0);
}
