import { CONSTANTS_VERSION, SOLIDS, SOURCES, SPECIES } from "@/lib/chemistry/data";
import type { LogKOverT, Solid, Source, Species } from "@/lib/chemistry/data/types";
import { logKAt } from "@/lib/chemistry/temperature";
import type { ConstantEntry, ConstantsTable } from "@/lib/schemas/api";

const side = (terms: [string, number][]): string =>
  terms.map(([name, count]) => (Math.abs(count) === 1 ? name : `${Math.abs(count)} ${name}`)).join(" + ");

/** "CO2(aq) + H2O = HCO3^- + H^+" from signed counts; a solid stands on the left by itself. */
function reactionText(reaction: Record<string, number> | null, solid: string | null): string {
  if (!reaction) return "";
  const terms = Object.entries(reaction);
  const left = terms.filter(([, count]) => count < 0);
  return `${side(solid ? [[solid, -1], ...left] : left)} = ${side(terms.filter(([, count]) => count > 0))}`;
}

const rounded = (value: number): number => Math.round(value * 1e4) / 1e4;

function described(logK: (LogKOverT & Source) | null, temperature: number): Pick<ConstantEntry, "logK" | "logK25" | "source" | "reference" | "fromMemory" | "note"> {
  if (!logK) return { logK: null, logK25: null, source: null, reference: null, fromMemory: false, note: null };
  return {
    logK: rounded(logKAt(logK, temperature)), logK25: rounded(logKAt(logK, 25)), source: logK.source,
    reference: referenceOf(logK.source), fromMemory: logK.fromMemory, note: logK.note ?? null,
  };
}

function referenceOf(key: string): string | null {
  const source: unknown = (SOURCES as Record<string, unknown>)[key];
  if (typeof source === "string") return source;
  const citation = (source as { citation?: unknown } | undefined)?.citation;
  return typeof citation === "string" ? citation : null;
}

const speciesEntry = (species: Species, temperature: number): ConstantEntry => ({
  name: species.name, formula: species.name, kind: "species", charge: species.charge,
  reaction: reactionText(species.reaction, null), ...described(species.logK, temperature),
});

const solidEntry = (solid: Solid, temperature: number): ConstantEntry => ({
  name: solid.name, formula: solid.formula, kind: "solid", charge: null,
  reaction: reactionText(solid.reaction, solid.formula), ...described(solid.logK, temperature),
});

/** Every species and solid of the constants set, with log K at a temperature (°C, 0–90) and where it comes from. */
export function listConstants(temperature: number): ConstantsTable {
  return {
    constantsVersion: CONSTANTS_VERSION, temperature,
    entries: [...Object.values(SPECIES).map((each) => speciesEntry(each, temperature)), ...Object.values(SOLIDS).map((each) => solidEntry(each, temperature))],
  };
}
