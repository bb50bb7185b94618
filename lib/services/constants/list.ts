import { CONSTANTS_VERSION, METHODS, SOLIDS, SOURCES, SPECIES } from "@/lib/chemistry/data";
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

interface At { temperature: number; temperatures: readonly number[] }

function described(logK: (LogKOverT & Source) | null, { temperature, temperatures }: At): Pick<ConstantEntry, "logK" | "logK25" | "logKs" | "form" | "source" | "reference" | "fromMemory" | "note"> {
  if (!logK) return { logK: null, logK25: null, logKs: null, form: null, source: null, reference: null, fromMemory: false, note: null };
  return {
    logKs: temperatures.map((each) => rounded(logKAt(logK, each))), form: formOf(logK),
    logK: rounded(logKAt(logK, temperature)), logK25: rounded(logKAt(logK, 25)), source: logK.source,
    reference: referenceOf(logK.source), fromMemory: logK.fromMemory, note: logK.note ?? null,
  };
}

function formOf(logK: LogKOverT): ConstantEntry["form"] {
  if (logK.form === "vantHoff") return { kind: "vantHoff", logK25: logK.logK25, reactionEnthalpy: logK.reactionEnthalpy };
  return { kind: "analytic", a: logK.a, bT: logK.bT, "c/T": logK.cOverT, "d·log10T": logK.dLog10T, "e/T2": logK.eOverT2 };
}

function referenceOf(key: string): string | null {
  const source: unknown = (SOURCES as Record<string, unknown>)[key];
  if (typeof source === "string") return source;
  const citation = (source as { citation?: unknown } | undefined)?.citation;
  return typeof citation === "string" ? citation : null;
}

const speciesEntry = (species: Species, at: At): ConstantEntry => ({
  name: species.name, formula: species.name, kind: "species", charge: species.charge,
  reaction: reactionText(species.reaction, null), ionSize: species.ionSize, truesdellJones: species.truesdellJones, conductance: species.conductance, ...described(species.logK, at),
});

const solidEntry = (solid: Solid, at: At): ConstantEntry => ({
  name: solid.name, formula: solid.formula, kind: "solid", charge: null,
  reaction: reactionText(solid.reaction, solid.formula), ionSize: null, truesdellJones: null, conductance: null, ...described(solid.logK, at),
});

/** Every species and solid of the constants set, with log K at a temperature and over a list of them (°C, 0–90), its form and where it comes from. */
export function listConstants(temperature: number, temperatures: readonly number[] = [0, 10, 25, 40]): ConstantsTable {
  const at = { temperature, temperatures };
  return {
    constantsVersion: CONSTANTS_VERSION, temperature, temperatures: [...temperatures],
    reference: { temperature: 25, pressure: "1 atm", state: "infinite dilution; reactions as printed, activities in mol/kg, a(H2O) = 1" },
    methods: [...METHODS],
    entries: [...Object.values(SPECIES).map((each) => speciesEntry(each, at)), ...Object.values(SOLIDS).map((each) => solidEntry(each, at))],
  };
}
