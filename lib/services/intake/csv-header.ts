/**
 * Column headings of laboratory tables: `Ca (mg/L)`, `Ca mg/L`, `Ca [mg/l]`, `NO3-N (mg/L)`, `Alk as CaCO3 (mg/L)`,
 * `Alkalinity (mg CaCO3/L)`, `EC (µS/cm)`, `Sample`, `Date`.
 */
import { ANALYTES } from "@/lib/chemistry/data";
import type { Analyte } from "@/lib/chemistry/data/types";
import { spellUnit } from "@/lib/chemistry/units";

export interface CsvColumn {
  /** Key of the row: an analyte, or id, site, date, temperature … */
  key: string;
  kind: "text" | "date" | "number" | "quantity";
  /** Unit with basis as a job spec writes it ("mg/L as N"); null where the heading gives none. */
  unit: string | null;
}

/** Headings of what is not an analyte; number columns are stored as bare numbers in the unit named here. */
const PLAIN: { key: string; kind: CsvColumn["kind"]; names: string[]; units: string[] }[] = [
  { key: "id", kind: "text", names: ["id", "sample", "sample id", "sample no", "sample number", "sample name", "lab id", "lab no", "water", "code"], units: [] },
  { key: "site", kind: "text", names: ["site", "station", "location", "place", "site name", "station name"], units: [] },
  { key: "date", kind: "date", names: ["date", "sampled", "sampling date", "sample date", "date sampled", "collected"], units: [] },
  { key: "pHTemperature", kind: "number", names: ["phtemperature", "ph temperature", "ph temp", "temperature of ph", "t ph"], units: ["°c", "degc", "c", "deg c"] },
  { key: "pH", kind: "number", names: ["ph", "field ph", "lab ph"], units: ["-", "ph units", "units"] },
  { key: "temperature", kind: "number", names: ["temperature", "temp", "water temperature", "water temp", "t", "t water"], units: ["°c", "degc", "c", "deg c"] },
  { key: "altitude", kind: "number", names: ["altitude", "elevation", "height", "alt"], units: ["m", "m asl", "masl"] },
  { key: "conductivity", kind: "number", names: ["conductivity", "ec", "cond", "specific conductance", "electrical conductivity", "ec25", "conductivity 25"], units: ["us/cm", "us cm-1", "us/cm at 25 °c"] },
];

const UNIT_WORD = String.raw`(?:[mkuµμ]?(?:g|mol|eq|val)(?:\s*(?:CaCO3|HCO3|CO3|NO3|NH4|NO2|SO4|PO4|SiO2|N|S|P|Si|C))?\s*(?:\/|\s+)\s*(?:L|l|kg|dm3)(?:-1|\^-1)?|ppm|ppb|°C|degC|[mµμu]S\s*\/\s*cm|m|mM|[uµμ]M)`;
const BRACKETED = /^(.*?)\s*[([]\s*([^()[\]]*)\s*[)\]]\s*(.*)$/u;
const TRAILING = new RegExp(String.raw`^(.+?)[\s,_;:]+(${UNIT_WORD})((?:\s+as\s+\S+)?)$`, "u");
const BASIS = /\s*(?:\bas\s+([A-Z][A-Za-z0-9]*)|-\s*(N|P|S|Si|C))\s*$/u;
const BASIS_IN_UNIT = /^([mkuµμ]?g)\s*(CaCO3|HCO3|CO3|NO3|NH4|NO2|SO4|PO4|SiO2|N|S|P|Si|C)\s*\/\s*(L|l|kg)$/u;

/** Spelling of a unit as the job spec knows it; "val" is the older word for an equivalent. */
const spell = (text: string): string => spellUnit(text).replace("/dm3", "/L").replace(/val\//, "eq/");

const fold = (text: string): string => text.toLowerCase().replaceAll(/[_.]+/g, " ").replaceAll(/\s+/g, " ").trim();

/** Name, unit and basis of a heading, each as written. */
function split(heading: string): { name: string; unit: string | null; basis: string | null } {
  let name = heading.trim();
  let unit: string | null = null;
  let basis: string | null = null;
  const bracketed = BRACKETED.exec(name);
  const trailing = bracketed ? null : TRAILING.exec(name);
  if (bracketed) {
    name = `${bracketed[1]} ${bracketed[3]}`.trim();
    unit = bracketed[2].trim() || null;
  } else if (trailing) {
    name = trailing[1];
    unit = trailing[2] + trailing[3];
  }
  const takeBasis = (text: string): string => {
    const match = BASIS.exec(text);
    if (!match) return text;
    basis = match[1] ?? match[2];
    return text.slice(0, match.index).trim();
  };
  if (unit !== null) unit = takeBasis(unit);
  name = takeBasis(name);
  const inside = unit === null ? null : BASIS_IN_UNIT.exec(unit);
  if (inside) {
    unit = `${inside[1]}/${inside[3]}`;
    basis = inside[2];
  }
  return { name, unit: unit === null ? null : spell(unit), basis };
}

interface Named { analyte: Analyte; /** Formula that the name itself counts masses in: SiO2 for silica. */ basis: string | null }

function analyteOf(name: string): Named | null {
  const bare = name.replaceAll(/[\^]?\d?[+-]+$/g, "").trim();
  for (const each of [fold(name), fold(bare)]) {
    const analyte = ANALYTES.find(({ key, synonyms }) => key.toLowerCase() === each || synonyms.includes(each));
    if (analyte) return { analyte, basis: analyte.namedBasis?.[each] ?? null };
  }
  return null;
}

/** Whether a unit is one of mass, which needs a formula to be counted in. */
const isMass = (unit: string): boolean => /^[kmunp]?g\/|^pp[mb]$/.test(unit);

/** What a heading says, or null where it names nothing Tufa knows. */
export function readHeading(heading: string): CsvColumn | null {
  const { name, unit, basis } = split(heading);
  const folded = fold(name);
  const plain = PLAIN.find((each) => each.names.includes(folded));
  if (plain && (unit === null || plain.units.length === 0 || plain.units.includes(unit.toLowerCase()))) {
    return { key: plain.key, kind: plain.kind, unit: null };
  }
  const named = analyteOf(name);
  if (!named) return null;
  const { analyte } = named;
  const chosen = unit ?? (basis ? analyte.defaultUnit : named.basis ? "mg/L" : null);
  if (chosen === null) return { key: analyte.key, kind: "quantity", unit: null };
  const counted = basis ?? (isMass(chosen) ? named.basis : null);
  return { key: analyte.key, kind: "quantity", unit: counted ? `${chosen} as ${counted}` : chosen };
}
