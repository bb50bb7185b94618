/** Names of columns and groups in a report. */
import { COLUMN_GROUPS, MAIN_COLUMNS } from "@/lib/chemistry/column-plan";
import { BUILT_IN, type ConstantsSet } from "@/lib/chemistry/data/constants-set";
import { effectiveCases, type SpecCase } from "@/lib/chemistry/effective-cases";
import { axisNames } from "@/lib/chemistry/fields";
import { organicSpecies } from "@/lib/chemistry/organic-model";
import { shorten } from "@/lib/chemistry/quantity";
import { organicOf } from "@/lib/chemistry/resolve-case";
import { BUFFER_INTENSITY, parseDerivative } from "@/lib/chemistry/sensitivity-names";
import type { Issue } from "@/lib/errors";
import { nearestName } from "@/lib/schemas/nearest-name";

/** Every name a report may hold. @param cases whose organic models bring species of their own. */
export function reportNames(cases: readonly SpecCase[], set: ConstantsSet = BUILT_IN): string[] {
  const organic = effectiveCases(cases).flatMap((each) => organicSpecies(organicOf(each)).map(({ name }) => name));
  const species = [...set.species.map(({ name }) => name).filter((name) => name !== "CO2(g)"), ...new Set(organic)];
  const solids = set.solids.map(({ name }) => name);
  const totals = set.analytes.filter(({ kind }) => kind === "total").map(({ key }) => key);
  return [
    ...Object.keys(MAIN_COLUMNS), ...COLUMN_GROUPS, "gas:CO2",
    ...species.map((name) => `conc:${name}`), ...species.map((name) => `lgActivity:${name}`),
    ...solids.map((name) => `SI:${name}`), ...solids.map((name) => `solid:${name}`), ...[...totals, "DIC"].map((key) => `dissolved:${key}`),
  ];
}

type Problem = Pick<Issue, "code" | "message" | "remedy">;

/** Faults of the report, one for each name that is none. @param cases null where they cannot be read: any organic species may then be theirs. */
export function checkReport(report: readonly string[], cases: readonly SpecCase[] | null, set: ConstantsSet = BUILT_IN): Issue[] {
  const names = reportNames(cases ?? [], set);
  const known = new Set(names);
  const isKnown = (name: string): boolean => known.has(name) || (cases === null && /^(conc|lgActivity):H?\d?Org/.test(name));
  return report.flatMap((name, index): Issue[] => {
    const problem = name.startsWith("d:") ? derivativeProblem(name, isKnown, names, set) : isKnown(name) ? null : columnProblem(name, names);
    return problem ? [{ pointer: `/report/${index}`, value: shorten(name), ...problem }] : [];
  });
}

function columnProblem(name: string, names: readonly string[]): Problem {
  if (name.includes("~")) return { code: "not-available-yet", message: `The column “${shorten(name)}” is not available yet.`, remedy: "Leave it out for now." };
  const nearest = nearestName(name, names);
  return { code: "unknown-column", message: `No column or group is called “${shorten(name)}”.`, remedy: nearest ? `Did you mean “${nearest}”?` : `Columns: ${Object.keys(MAIN_COLUMNS).join(", ")}; groups: ${COLUMN_GROUPS.join(", ")}; or conc:…, lgActivity:…, SI:…, solid:…, dissolved:…, d:<column>/<input>.` };
}

/** "d:pH/Ca": a column by an input, both known. */
function derivativeProblem(name: string, isKnown: (name: string) => boolean, names: readonly string[], set: ConstantsSet): Problem | null {
  const parts = parseDerivative(name);
  if (!parts) return { code: "unknown-column", message: `“${shorten(name)}” names no derivative.`, remedy: "Write d:<column>/<input>, such as d:pH/Ca or d:SI:calcite/temperature." };
  const { column, input } = parts;
  const isGroup = (COLUMN_GROUPS as readonly string[]).includes(column);
  if (isGroup || column === BUFFER_INTENSITY) return { code: "unknown-column", message: `${isGroup ? "A group of columns" : "A derivative"} cannot be derived: “${shorten(column)}”.`, remedy: "Name one column, such as d:pH/Ca." };
  if (!isKnown(column)) {
    const nearest = nearestName(column, names);
    return { code: "unknown-column", message: `No column is called “${shorten(column)}”.`, remedy: nearest ? `Did you mean “d:${nearest}/${shorten(input)}”?` : "Write d:<column>/<input>, such as d:pH/Ca." };
  }
  const inputs = axisNames(set);
  if (inputs.includes(input)) return null;
  const nearest = nearestName(input, inputs);
  return { code: "unknown-field", message: `Nothing called “${shorten(input)}” is an input.`, remedy: nearest ? `Did you mean “d:${column}/${nearest}”?` : "Inputs are what an axis may vary: Ca, pCO2, pH, temperature, constants/calcite/logK …" };
}
