/** What an answered water is shown by: its figures in order, with the unit a chemist would write them in. */
import type { JobSpec } from "@/lib/schemas/job-spec";
import { fixed, signed, significant } from "@/lib/commands/numbers";

export interface Figure {
  key: string;
  label: string;
  unit: string;
  value: string;
  /** The number behind it, for comparisons. */
  raw: number | null;
  /** Differences up to this are not worth marking. */
  tolerance: number;
  /** Said on hover and to screen readers. */
  explained: string;
}

type Row = Record<string, unknown>;
const number = (value: unknown): number | null => (typeof value === "number" && Number.isFinite(value) ? value : null);

/** pCO2 the way monitoring people say it: ppm of one atmosphere below one per cent, atm above. */
function pressure(atm: number | null): { value: string; unit: string } {
  if (atm === null) return { value: "–", unit: "" };
  return atm < 0.1 ? { value: significant(atm * 1e6, 4), unit: "µatm" } : { value: significant(atm, 4), unit: "atm" };
}

/** The figures every answer shows. */
export function figuresOf(row: Row): Figure[] {
  const pCO2 = pressure(number(row.pCO2));
  const scaled = (key: string, by: number): number | null => { const value = number(row[key]); return value === null ? null : value * by; };
  const dic = scaled("DIC", 1000);
  const strength = scaled("ionicStrength", 1000);
  const figures: Figure[] = [
    { key: "pH", label: "pH", unit: "", value: fixed(row.pH, 3), raw: number(row.pH), tolerance: 0.0005, explained: "minus the logarithm of the hydrogen-ion activity" },
    { key: "ANC", label: "ANC", unit: "µeq/L", value: fixed(row.ANC, 1), raw: number(row.ANC), tolerance: 0.05, explained: "acid neutralising capacity" },
    { key: "alkalinity", label: "alkalinity", unit: "µeq/L", value: fixed(row.alkalinity, 1), raw: number(row.alkalinity), tolerance: 0.05, explained: "inorganic alkalinity to the CO2 end point" },
    { key: "pCO2", label: "pCO2", ...pCO2, raw: number(row.pCO2), tolerance: (number(row.pCO2) ?? 0) * 5e-4, explained: "partial pressure of CO2 in equilibrium with the water" },
    { key: "DIC", label: "DIC", unit: "mmol/kg", value: significant(dic, 4), raw: dic, tolerance: (dic ?? 0) * 5e-4, explained: "total dissolved inorganic carbon" },
    { key: "ionicStrength", label: "ionic strength", unit: "mmol/kg", value: significant(strength, 4), raw: strength, tolerance: (strength ?? 0) * 5e-4, explained: "half the sum of concentration times charge squared" },
  ];
  const conductivity = number(row.conductivity);
  if (conductivity !== null) figures.push({ key: "conductivity", label: "conductivity", unit: "µS/cm", value: fixed(conductivity, 0), raw: conductivity, tolerance: 0.5, explained: "computed, at 25 °C" });
  return figures;
}

export interface Saturation { solid: string; index: number }

/** Saturation indices that exist, highest first. */
export function saturationsOf(row: Row): Saturation[] {
  return Object.entries(row).flatMap(([key, value]) => (key.startsWith("SI:") && typeof value === "number" ? [{ solid: key.slice(3), index: value }] : []))
    .sort((a, b) => b.index - a.index);
}

export interface SpeciesShare { name: string; mmol: number }

/** Species of the water, largest first, down to a millionth of the largest; water itself left out. */
export function speciesOf(row: Row): SpeciesShare[] {
  const all = Object.entries(row).flatMap(([key, value]) => (key.startsWith("conc:") && typeof value === "number" && value > 0 && key !== "conc:H2O" ? [{ name: key.slice(5), mmol: value * 1000 }] : []));
  all.sort((a, b) => b.mmol - a.mmol);
  return all.filter((each) => each.mmol > (all[0]?.mmol ?? 0) * 1e-6);
}

export interface Transfer { what: string; mmol: number }

/** What gas and solids brought (+) or took (−), in mmol per litre. */
export function transfersOf(row: Row): Transfer[] {
  return Object.entries(row).flatMap(([key, value]) => {
    if (typeof value !== "number" || Math.abs(value) < 1e-9) return [];
    if (key.startsWith("solid:")) return [{ what: key.slice(6), mmol: value }];
    return key === "gas:CO2" ? [{ what: "CO2 gas", mmol: value }] : [];
  });
}

export const saturationWord = (index: number): string => (Math.abs(index) < 0.05 ? "at saturation" : index > 0 ? "above" : "below");

const text = (value: unknown): string => {
  if (value === null || value === undefined) return "";
  if (typeof value === "object" && "log10" in value) return `10^${String(value.log10)} atm`;
  if (typeof value === "object" && "value" in value) return `${String(value.value)} ${"unit" in value ? String(value.unit) : ""}`.trim();
  return typeof value === "number" ? `${Number(value.toPrecision(4))}` : String(value);
};

const FACT_WORDS: Record<string, string> = { charge: "balance of charges", pH: "pH", ANC: "ANC", alkalinity: "alkalinity", pCO2: "pCO2", DIC: "DIC" };
const pressureText = (value: unknown): string => (typeof value === "number" ? `${significant(value * 1e6, 4)} µatm` : text(value));

/** The assumptions behind an answer, one short sentence each, read from the spec that was sent. */
export function assumptionsOf(spec: JobSpec): string[] {
  const [each] = spec.cases;
  const rows = "rows" in spec.waters ? spec.waters.rows : undefined;
  const water = (rows?.[0] ?? {}) as Row;
  const close = (each.close as readonly (string | { saturated: string; SI?: number })[] | undefined) ?? [];
  const said: string[] = [];
  said.push(`settled by ${close.map((fact) => (typeof fact === "string" ? FACT_WORDS[fact] ?? fact : `saturation with ${fact.saturated}`)).join(" and ")}`);
  const usesPressure = close.includes("pCO2") || each.react?.gas === "open";
  if (usesPressure) said.push(`pCO2 ${pressureText(each.pCO2 ?? water.pCO2)}`);
  if (each.react) said.push(...reactionSaid(each.react as Row, close.includes("pCO2")));
  else said.push("no solid, as sampled");
  const temperature = each.temperature ?? water.temperature;
  if (temperature !== undefined) said.push(`${text(temperature)} °C`.replace("°C °C", "°C"));
  said.push(`${each.activity ?? "davies"} activities`);
  const organic = (each.organic as Row | undefined)?.model ?? (each.organic ? "own organic acids" : "none");
  said.push(organic === "none" ? (water.DOC !== undefined ? "organic acids left out" : "no organic acids") : `organic acids after ${String(organic)}`);
  if (each.complexes !== undefined && each.complexes !== "all") said.push(each.complexes === "none" ? "no ion pairs" : "chosen ion pairs only");
  said.push("1 L taken as 1 kg");
  return said;
}

function reactionSaid(react: Row, isOpenByDefault: boolean): string[] {
  const gas = react.gas ?? (isOpenByDefault ? "open" : "closed");
  const said = [gas === "closed" ? "then closed to gas" : gas === "open" ? "then open to the gas" : `then open at pCO2 ${pressureText(gas)}`];
  for (const [solid, terms] of Object.entries((react.solids ?? {}) as Record<string, Row>)) {
    const supply = terms.supply ?? "may-form";
    const target = typeof terms.saturation === "number" && terms.saturation !== 0 ? ` at SI ${terms.saturation}` : "";
    said.push(supply === "excess" ? `${solid} in excess${target}` : supply === "may-form" ? `${solid} may form${target}` : `up to ${text(supply)} of ${solid}${target}`);
  }
  return said;
}

export const balanceText = (percent: number): string => `${signed(percent, 1)} %`;
