/** What no schema can say about cases: facts that go together, values that can be read, names that lead somewhere. */
import { BUILT_IN, type ConstantsSet } from "@/lib/chemistry/data/constants-set";
import { effectiveCases, type Fact, factName, type SpecCase } from "@/lib/chemistry/effective-cases";
import { type Field, GAS, LOG_K, rowFields, SATURATION, SITES, supplyField } from "@/lib/chemistry/fields";
import { isProblem, rangeProblem, readQuantity, shorten } from "@/lib/chemistry/quantity";
import { pointerTo } from "@/lib/chemistry/spec-issues";
import type { Issue } from "@/lib/errors";
import { nearestName } from "@/lib/schemas/nearest-name";

type Units = Readonly<Record<string, string>>;

/** Every fault of the cases. */
export function checkCases(cases: readonly SpecCase[], units: Units, set: ConstantsSet = BUILT_IN): Issue[] {
  const merged = effectiveCases(cases);
  const names = cases.map((each) => each.name);
  return cases.flatMap((each, index) => {
    const path = ["cases", index];
    return [
      ...nameIssues(cases, index, names),
      ...closeIssues(each, merged[index], path),
      ...valueIssues(each, path, units, set),
      ...organicIssues(each, path),
      ...reactIssues(each, path, set),
    ];
  });
}

function nameIssues(cases: readonly SpecCase[], index: number, names: readonly string[]): Issue[] {
  const { name, like } = cases[index];
  const issues: Issue[] = [];
  if (names.indexOf(name) < index) issues.push({ pointer: `/cases/${index}/name`, code: "duplicate", message: `Two cases are called “${shorten(name)}”.`, value: shorten(name), remedy: "Give each case a name of its own." });
  if (like === undefined) return issues;
  const pointer = `/cases/${index}/like`;
  if (!names.includes(like)) {
    const nearest = nearestName(like, names.filter((each) => each !== name));
    issues.push({ pointer, code: "unknown-case", message: `No case is called “${shorten(like)}”.`, value: shorten(like), remedy: nearest ? `Did you mean “${nearest}”?` : `Cases: ${names.slice(0, 20).join(", ")}.` });
  } else if (goesRound(cases, index)) {
    issues.push({ pointer, code: "circular", message: `“${shorten(name)}” is like itself, by way of “${shorten(like)}”.`, value: shorten(like), remedy: "Let one of them stand by itself." });
  }
  return issues;
}

function goesRound(cases: readonly SpecCase[], index: number): boolean {
  const byName = new Map(cases.map((each) => [each.name, each]));
  const seen = new Set<string>();
  for (let at: SpecCase | undefined = cases[index]; at; at = at.like === undefined ? undefined : byName.get(at.like)) {
    if (seen.has(at.name)) return true;
    seen.add(at.name);
  }
  return false;
}

const PROTON = ["charge", "ANC", "alkalinity"];
const CARBON = ["pCO2", "DIC", "saturated"];
const PAIRS = "Pairs: charge, ANC, alkalinity or pH with pCO2, DIC or { \"saturated\": … }; pH with charge, ANC or alkalinity; DIC with pCO2.";

/** Why two facts do not settle a water, or null where they do. */
export function pairProblem(facts: readonly string[]): string | null {
  const [a, b] = facts;
  if (a === b) return `${a} is named twice; two different facts settle a water`;
  const isBalance = (fact: string): boolean => PROTON.includes(fact);
  if (isBalance(a) && isBalance(b)) return `${a} and ${b} both fix the hydrogen balance, and nothing fixes the carbon`;
  const carbons = facts.filter((fact) => CARBON.includes(fact));
  if (carbons.length === 2 && carbons.includes("saturated")) return `${a} and ${b} both fix the carbon, and nothing fixes the hydrogen`;
  return null;
}

function closeIssues(own: SpecCase, merged: SpecCase, path: (string | number)[]): Issue[] {
  const pointer = pointerTo([...path, "close"]);
  if (!merged.close) return [{ pointer, code: "missing", message: "The two facts that settle the water are missing.", remedy: `Add "close". ${PAIRS}` }];
  if (!own.close) return [];
  const problem = pairProblem(own.close.map((fact: Fact) => factName(fact)));
  return problem ? [{ pointer, code: "no-pair", message: `These facts do not settle a water: ${problem}.`, value: shorten(own.close), remedy: PAIRS }] : [];
}

function quantityIssues(raw: unknown, field: Field, path: (string | number)[], unit: string | null): Issue[] {
  const pointer = pointerTo(path);
  const read = readQuantity(raw, field, unit);
  if (isProblem(read)) return [{ pointer, code: read.code, message: read.message, value: shorten(raw), remedy: read.remedy }];
  const range = rangeProblem(read.base, field);
  return range ? [{ pointer, code: range.code, message: range.message, value: shorten(raw), remedy: range.remedy }] : [];
}

function valueIssues(each: SpecCase, path: (string | number)[], units: Units, set: ConstantsSet): Issue[] {
  return Object.entries(each).flatMap(([key, raw]) => {
    const field = rowFields(set).get(key);
    return field && raw !== undefined ? quantityIssues(raw, field, [...path, key], Object.hasOwn(units, key) ? units[key] : null) : [];
  });
}

function organicIssues({ organic }: SpecCase, path: (string | number)[]): Issue[] {
  if (!organic) return [];
  const pointer = pointerTo([...path, "organic"]);
  const issues: Issue[] = [];
  if (organic.sites !== undefined) issues.push(...quantityIssues(organic.sites, SITES, [...path, "organic", "sites"], null));
  const hasOwn = organic.pKa !== undefined;
  if (hasOwn && organic.model !== undefined) issues.push({ pointer, code: "contradiction", message: "A published model and own pKa values exclude each other.", remedy: "Give model, or pKa with sites." });
  else if (hasOwn && organic.sites === undefined) issues.push({ pointer: `${pointer}/sites`, code: "missing", message: "Own pKa values need the sites per mass of carbon.", remedy: "Add \"sites\": \"8.6 ueq/mg\", say." });
  else if (!hasOwn && organic.model === undefined) issues.push({ pointer, code: "missing", message: "Neither a model nor pKa values are given.", remedy: "Add \"model\", or \"pKa\" with \"sites\"." });
  return issues;
}

function reactIssues({ react }: SpecCase, path: (string | number)[], set: ConstantsSet): Issue[] {
  if (!react) return [];
  const issues: Issue[] = [];
  if (react.gas !== undefined && react.gas !== "open" && react.gas !== "closed") {
    const found = quantityIssues(react.gas, GAS, [...path, "react", "gas"], null);
    issues.push(...found.map((issue) => (issue.code === "unreadable-quantity" ? { ...issue, message: `The gas is closed, open or a pressure, not ${shorten(react.gas)}.`, remedy: "Write \"closed\", \"open\" or a pressure such as \"420 ppm\"." } : issue)));
  }
  for (const [name, solid] of Object.entries(react.solids ?? {})) {
    const at = [...path, "react", "solids", name];
    const data = set.solids.find((each) => each.name === name);
    if (!data || !solid) continue;
    if (solid.supply !== undefined && solid.supply !== "excess" && solid.supply !== "may-form") issues.push(...quantityIssues(solid.supply, supplyField(data), [...at, "supply"], null));
    if (solid.saturation !== undefined) issues.push(...quantityIssues(solid.saturation, SATURATION, [...at, "saturation"], null));
    if (solid.logK !== undefined) issues.push(...quantityIssues(solid.logK, LOG_K, [...at, "logK"], null));
  }
  return issues;
}
