/** Names of columns and groups in a report. */
import { COLUMN_GROUPS, MAIN_COLUMNS } from "@/lib/chemistry/column-plan";
import { ANALYTES, SOLIDS, SPECIES } from "@/lib/chemistry/data";
import { effectiveCases, type SpecCase } from "@/lib/chemistry/effective-cases";
import { organicSpecies } from "@/lib/chemistry/organic-model";
import { shorten } from "@/lib/chemistry/quantity";
import { organicOf } from "@/lib/chemistry/resolve-case";
import type { Issue } from "@/lib/errors";
import { nearestName } from "@/lib/schemas/nearest-name";

/** Every name a report may hold. @param cases whose organic models bring species of their own. */
export function reportNames(cases: readonly SpecCase[]): string[] {
  const organic = effectiveCases(cases).flatMap((each) => organicSpecies(organicOf(each)).map(({ name }) => name));
  const species = [...SPECIES.map(({ name }) => name).filter((name) => name !== "CO2(g)"), ...new Set(organic)];
  const solids = SOLIDS.map(({ name }) => name);
  const totals = ANALYTES.filter(({ kind }) => kind === "total").map(({ key }) => key);
  return [
    ...Object.keys(MAIN_COLUMNS), ...COLUMN_GROUPS, "gas:CO2",
    ...species.map((name) => `conc:${name}`), ...species.map((name) => `lgActivity:${name}`),
    ...solids.map((name) => `SI:${name}`), ...solids.map((name) => `solid:${name}`), ...[...totals, "DIC"].map((key) => `dissolved:${key}`),
  ];
}

/** Faults of the report, one for each name that is none. @param cases null where they cannot be read: any organic species may then be theirs. */
export function checkReport(report: readonly string[], cases: readonly SpecCase[] | null): Issue[] {
  const names = reportNames(cases ?? []);
  const known = new Set(names);
  return report.flatMap((name, index): Issue[] => {
    if (known.has(name) || (cases === null && /^(conc|lgActivity):H?\d?Org/.test(name))) return [];
    const pointer = `/report/${index}`;
    if (name.startsWith("d:") || name === "bufferIntensity" || name.includes("~")) return [{ pointer, code: "not-available-yet", message: `The column “${shorten(name)}” is not available yet.`, value: shorten(name), remedy: "Leave it out for now." }];
    const nearest = nearestName(name, names);
    return [{ pointer, code: "unknown-column", message: `No column or group is called “${shorten(name)}”.`, value: shorten(name), remedy: nearest ? `Did you mean “${nearest}”?` : `Columns: ${Object.keys(MAIN_COLUMNS).join(", ")}; groups: ${COLUMN_GROUPS.join(", ")}; or conc:…, lgActivity:…, SI:…, solid:…, dissolved:….` }];
  });
}
