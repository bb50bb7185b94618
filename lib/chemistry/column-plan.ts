/** Which value columns a job has: names and groups of the report, expanded over the species of its cases, with descriptions. */
import type { CaseSolver } from "@/lib/chemistry/case-solver";
import { BUILT_IN } from "@/lib/chemistry/data/constants-set";
import { derivativeColumn, parseDerivative } from "@/lib/chemistry/sensitivity-names";
import type { ColumnDescriptor } from "@/lib/schemas/columns";

/** The report of a spec that names none. */
export const DEFAULT_REPORT: readonly string[] = ["pH", "ANC", "alkalinity", "DIC", "pCO2", "ionicStrength", "balanceError", "conductivity", "SI"];

type Shape = Omit<ColumnDescriptor, "name" | "type" | "group">;

export const MAIN_COLUMNS: Readonly<Record<string, Shape>> = {
  pH: { unit: "", basis: null, description: "−log10 of the hydrogen-ion activity" },
  ANC: { unit: "µeq/L", basis: "as charge", description: "Acid neutralising capacity: strong ions' charge less the charge of all species" },
  ANCions: { unit: "µeq/L", basis: "as charge", description: "Charge of the strong ions: strong-base cations less strong-acid anions" },
  conservedANC: { unit: "µeq/L", basis: "as charge", description: "ANC without the metals of carbonate solids in excess: unchanged while such solids react" },
  alkalinity: { unit: "µeq/L", basis: "as charge", description: "Inorganic alkalinity to the CO2 end point; aluminium and organic anions left out" },
  chargeError: { unit: "µeq/L", basis: "as charge", description: "Charge of all species, Σ z·c" },
  balanceError: { unit: "%", basis: null, description: "100·Σ z·c/Σ |z|·c; the divisor is the sum of cations and anions, not half of it" },
  DIC: { unit: "mol/kg", basis: "as C", description: "Total dissolved inorganic carbon" },
  ionicStrength: { unit: "mol/kg", basis: null, description: "½ Σ c·z² over every species" },
  pCO2: { unit: "atm", basis: null, description: "Partial pressure of CO2 in equilibrium with the water (fugacity taken as pressure)" },
  bufferIntensity: { unit: "meq/L per pH unit", basis: "as charge", description: "dC_B/dpH: strong base for one unit of pH; DIC constant in a sampled water, gas and solids acting in a reacted one; null where they hold the pH" },
  conductivity: { unit: "µS/cm", basis: null, description: "Electrical conductivity at 25 °C estimated from the free ions" },
};

export const COLUMN_GROUPS = ["species", "activities", "SI", "solids", "dissolved"] as const;

const shapeOf = {
  conc: (name: string): ColumnDescriptor => ({ name: `conc:${name}`, type: "number", unit: "mol/kg", basis: null, description: `Concentration of ${name}`, group: "species" }),
  lgActivity: (name: string): ColumnDescriptor => ({ name: `lgActivity:${name}`, type: "number", unit: "", basis: null, description: `log10 of the activity of ${name}`, group: "activities" }),
  SI: (name: string): ColumnDescriptor => ({ name: `SI:${name}`, type: "number", unit: "", basis: null, description: `Saturation index of ${name}, log10(IAP/K)`, group: "SI" }),
  solid: (name: string): ColumnDescriptor => ({ name: `solid:${name}`, type: "number", unit: "mmol/L", basis: null, description: `${name} dissolved (+) or formed (−)`, group: "solids" }),
  gas: (name: string): ColumnDescriptor => ({ name: `gas:${name}`, type: "number", unit: "mmol/L", basis: null, description: `${name} taken up (+) or given off (−)`, group: "solids" }),
  dissolved: (name: string): ColumnDescriptor => ({ name: `dissolved:${name}`, type: "number", unit: "mol/kg", basis: null, description: `Total dissolved ${name}`, group: "dissolved" }),
};

/**
 * The value columns of a job, in the order of the report, each once.
 * @param units default unit per column, which derivatives by that column are taken in.
 * @throws Error for a name that is neither a column nor a group: the spec's check lets none through.
 */
export function planColumns(report: readonly string[], cases: readonly CaseSolver[], units: Readonly<Record<string, string>> = {}): ColumnDescriptor[] {
  const set = cases[0]?.model.set ?? BUILT_IN;
  const columns = new Map<string, ColumnDescriptor>();
  const add = (column: ColumnDescriptor) => { if (!columns.has(column.name)) columns.set(column.name, column); };
  const speciesNames = [...new Set(cases.flatMap((c) => c.model.species))];
  const solidNames = set.solids.map((s) => s.name);
  const reacting = solidNames.filter((name) => cases.some((c) => c.kase.react?.solids.some((s) => s.name === name)));
  const totals = set.analytes.filter((a) => a.kind === "total").map((a) => a.key);
  const groups: Record<string, () => void> = {
    species: () => speciesNames.forEach((name) => add(shapeOf.conc(name))),
    activities: () => speciesNames.forEach((name) => add(shapeOf.lgActivity(name))),
    SI: () => solidNames.forEach((name) => add(shapeOf.SI(name))),
    solids: () => reacting.forEach((name) => add(shapeOf.solid(name))),
    dissolved: () => totals.forEach((name) => add(shapeOf.dissolved(name))),
  };
  for (const name of report.length > 0 ? report : DEFAULT_REPORT) {
    if (groups[name]) { groups[name](); continue; }
    const derivative = parseDerivative(name);
    add(derivative ? derivativeColumn(name, namedColumn(derivative.column), units, set) : namedColumn(name));
  }
  return [...columns.values()];
}

function namedColumn(name: string): ColumnDescriptor {
  if (MAIN_COLUMNS[name]) return { name, type: "number", ...MAIN_COLUMNS[name], group: "main" };
  const colon = name.indexOf(":");
  const kind = name.slice(0, colon);
  if (colon < 0 || !(kind in shapeOf)) throw new Error(`report: ${name} is neither a column nor a group`);
  return shapeOf[kind as keyof typeof shapeOf](name.slice(colon + 1));
}
