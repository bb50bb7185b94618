/** A case from words and units to numbers in base units. */
import type { SpecCase } from "@/lib/chemistry/effective-cases";
import { type Field, GAS, rowFields, SITES, supplyField } from "@/lib/chemistry/fields";
import { ATOMIC_MASSES } from "@/lib/chemistry/data";
import { BUILT_IN, type ConstantsSet } from "@/lib/chemistry/data/constants-set";
import type { Solid } from "@/lib/chemistry/data/types";
import { isProblem, type Quantity, readQuantity } from "@/lib/chemistry/quantity";
import { type BelowLimit, countedBase } from "@/lib/chemistry/resolve-water";
import type { Pressure, ResolvedCase, ResolvedSolid } from "@/lib/chemistry/types";

type Units = Readonly<Record<string, string>>;

/** Reads a value of a checked spec. Throws on a fault: checkSpec lets none through. */
export function readChecked(raw: unknown, field: Field, unit: string | null): Quantity {
  const read = readQuantity(raw, field, unit);
  if (isProblem(read)) throw new Error(`${field.key}: ${read.message}`);
  return read;
}

export const pressureOf = (read: Quantity): Pressure => (read.isDryFraction ? { dryFraction: read.base } : { atm: read.base });

/** mol of sites per mg C of the published models (Oliver et al. 1983; Hruška et al. 2003; Driscoll et al. 1994) and their pKa. */
const PUBLISHED: Record<"oliver-1983" | "hruska-2003" | "driscoll-1994", { pKa: number[]; sitesPerMgC: number }> = {
  "oliver-1983": { pKa: [], sitesPerMgC: 10e-6 },
  "hruska-2003": { pKa: [3.04, 4.51, 6.46], sitesPerMgC: 8.6e-6 },
  "driscoll-1994": { pKa: [2.62, 5.66, 5.94], sitesPerMgC: 0.055e-3 / ATOMIC_MASSES.C },
};

/** The organic model of a case whose `like` has been followed. */
export function organicOf({ organic }: SpecCase): ResolvedCase["organic"] {
  const own = organic?.sites === undefined ? null : readQuantity(organic.sites, SITES);
  const sites = own && !isProblem(own) ? own.base : null;
  if (organic?.pKa) return { model: "own", pKa: [...organic.pKa], sitesPerMgC: sites ?? 0 };
  const model = organic?.model ?? "none";
  if (model === "none") return { model, pKa: [], sitesPerMgC: 0 };
  return { model, pKa: PUBLISHED[model].pKa, sitesPerMgC: sites ?? PUBLISHED[model].sitesPerMgC };
}

/** @param kase with its `like` followed, of a checked spec. */
export function resolveCase(kase: SpecCase, units: Units, belowLimit: BelowLimit, set: ConstantsSet = BUILT_IN): ResolvedCase {
  const facts = kase.close!.map((fact) => (typeof fact === "string" ? fact : "saturated" as const));
  const saturation = kase.close!.find((fact) => typeof fact === "object");
  return {
    name: kase.name,
    close: { facts: [facts[0], facts[1]], saturated: saturation ? { solid: saturation.saturated, SI: saturation.SI ?? 0 } : null },
    given: givenOf(kase, { units, belowLimit, set }),
    activity: kase.activity ?? "davies",
    organic: organicOf(kase),
    complexes: kase.complexes ?? "all",
    constants: Object.fromEntries(Object.entries(kase.constants ?? {}).map(([name, value]) => [name, { logK: value!.logK }])),
    react: reactOf(kase, facts, set),
  };
}

interface Reading { units: Units; belowLimit: BelowLimit; set: ConstantsSet }

function givenOf(kase: SpecCase, { units, belowLimit, set }: Reading): ResolvedCase["given"] {
  const given: ResolvedCase["given"] = {};
  const read = (key: string, raw: unknown): Quantity => {
    const quantity = readChecked(raw, rowFields(set).get(key)!, Object.hasOwn(units, key) ? units[key] : null);
    return { ...quantity, base: countedBase(quantity, belowLimit) };
  };
  for (const key of ["temperature", "pH", "pHTemperature", "altitude", "alkalinity", "ANC", "DIC", "DOC"] as const) {
    if (kase[key] !== undefined) given[key] = read(key, kase[key]).base;
  }
  if (kase.pressure !== undefined) given.pressureAtm = read("pressure", kase.pressure).base;
  if (kase.pCO2 !== undefined) given.pCO2 = pressureOf(read("pCO2", kase.pCO2));
  for (const { key, kind } of set.analytes) {
    const raw = (kase as Record<string, unknown>)[key];
    if (kind === "total" && raw !== undefined) (given.totals ??= {})[key] = read(key, raw).base;
  }
  return given;
}

function reactOf(kase: SpecCase, facts: readonly string[], set: ConstantsSet): ResolvedCase["react"] {
  if (!kase.react) return null;
  const { gas, solids } = kase.react;
  // The rule of the spec: open where close has pCO2, else closed.
  const usual = facts.includes("pCO2") ? "open" as const : "closed" as const;
  const isWord = gas === "open" || gas === "closed";
  return {
    gas: gas === undefined ? usual : isWord ? gas : pressureOf(readChecked(gas, GAS, null)),
    solids: Object.entries(solids ?? {}).map(([name, given]): ResolvedSolid => ({
      name, supply: supplyOf(set.solids.find((each) => each.name === name)!, given!.supply), saturation: given!.saturation ?? 0, logK: given!.logK ?? null,
    })),
  };
}

function supplyOf(solid: Solid, supply: unknown): ResolvedSolid["supply"] {
  if (supply === undefined || supply === "may-form") return "may-form";
  if (supply === "excess") return "excess";
  return readChecked(supply, supplyField(solid), null).base;
}
