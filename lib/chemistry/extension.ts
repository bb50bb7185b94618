/**
 * A spec's own species, solids and analytes, added to the built-in constants set. Faults are found here too, each with its place below
 * /extend, because finding them and reading the entries is one and the same walk; a set with faults serves to look names up, no more.
 */
import { type Atoms, atomProblems, type ElementTable, elementTable, massOf, readComposition } from "@/lib/chemistry/extension-elements";
import { readLogK } from "@/lib/chemistry/extension-log-k";
import { BUILT_IN, type ConstantsSet } from "@/lib/chemistry/data/constants-set";
import { chargeOf } from "@/lib/chemistry/data/formula";
import type { Analyte, Solid, Species } from "@/lib/chemistry/data/types";
import { rowFields } from "@/lib/chemistry/fields";
import { shorten } from "@/lib/chemistry/quantity";
import { makeBasis } from "@/lib/chemistry/reaction-basis";
import { pointerTo } from "@/lib/chemistry/spec-issues";
import { splitUnit, unitScale, unitsOf } from "@/lib/chemistry/units";
import type { Issue } from "@/lib/errors";
import { type Extend, OWN_ANALYTES, OWN_SOLIDS, OWN_SPECIES, type OwnAnalyte, type OwnSolid, type OwnSpecies } from "@/lib/schemas/extend";
import { nearestName } from "@/lib/schemas/nearest-name";

export interface ExtendedSet { set: ConstantsSet; issues: Issue[] }

/** Words of rows and cases that no analyte may take. */
const TAKEN_KEYS = new Set(["id", "site", "date", "temperature", "pH", "pHTemperature", "altitude", "pressure", "pCO2", "conductivity", "name", "like", "close", "activity", "organic", "complexes", "constants", "react", "steps", "keep", "charge", "saturated"]);
const BUILT_IN_METALS = ["Na", "K", "Ca", "Mg", "Sr", "Ba", "Al"];

interface Walk {
  extend: Extend;
  elements: ElementTable;
  issues: Issue[];
  /** Composition by species name, built-in and own. */
  atoms: Map<string, Atoms>;
  metals: Set<string>;
}

/** @param extend as parsed by its schema. */
export function extendSet(extend: Extend): ExtendedSet {
  const issues: Issue[] = [];
  const elements = elementTable(extend);
  const atoms = new Map<string, Atoms>(BUILT_IN.species.map((s) => [s.name, s.composition]));
  atoms.set("H2O", { H: 2, O: 1 });
  const walk: Walk = { extend, elements, issues, atoms, metals: new Set(BUILT_IN_METALS) };
  countIssues(walk);
  const components = Object.entries(extend.analytes ?? {}).map(([key, own]) => readComponent(walk, key, own));
  for (const s of components) {
    const [element, ...others] = Object.keys(s.composition);
    if (s.charge > 0 && others.length === 0 && element !== "H") walk.metals.add(element);
  }
  const formed = readFormed(walk);
  const solids = Object.entries(extend.solids ?? {}).map(([name, own]) => readSolid(walk, name, own));
  const takingProtons = protonTakers(components, formed);
  const analytes = Object.entries(extend.analytes ?? {}).map(([key, own], k) => readAnalyte(walk, key, own, components[k], takingProtons));
  const set: ConstantsSet = {
    species: [...BUILT_IN.species, ...components, ...formed], analytes: [...BUILT_IN.analytes, ...analytes],
    solids: [...BUILT_IN.solids, ...solids.map((solid) => withConserved(solid, [...BUILT_IN.analytes, ...analytes]))],
  };
  unitIssues(walk, set);
  return { set, issues };
}

function unitIssues({ extend, issues }: Walk, set: ConstantsSet): void {
  for (const [key, { defaultUnit }] of Object.entries(extend.analytes ?? {})) {
    const field = rowFields(set).get(key);
    if (defaultUnit === undefined || !field) continue;
    const { unit, as } = splitUnit(defaultUnit);
    const scale = unitScale(field, unit, as);
    if ("message" in scale) issues.push({ pointer: pointerTo(["extend", "analytes", key, "defaultUnit"]), code: "unknown-unit", message: scale.message, value: shorten(defaultUnit), remedy: `Write one of ${unitsOf(field).filter((each) => each !== defaultUnit).join(", ")}.` });
  }
}

const known = new WeakMap<object, ConstantsSet>();

/** The set a spec computes with. @throws Error where its extension has faults: checkSpec lets none through. */
export function constantsSetOf(extend: Extend | undefined): ConstantsSet {
  if (!extend) return BUILT_IN;
  let set = known.get(extend);
  if (!set) {
    const built = extendSet(extend);
    if (built.issues.length > 0) throw new Error(`extend: ${built.issues[0].pointer}: ${built.issues[0].message}`);
    set = built.set;
    known.set(extend, set);
  }
  return set;
}

function countIssues({ extend, issues }: Walk): void {
  for (const [part, most] of [["species", OWN_SPECIES], ["solids", OWN_SOLIDS], ["analytes", OWN_ANALYTES]] as const) {
    const count = Object.keys(extend[part] ?? {}).length;
    if (count > most) issues.push({ pointer: `/extend/${part}`, code: "out-of-range", message: `There are ${count} own ${part}; a spec holds up to ${most}.`, remedy: `Keep at most ${most}.` });
  }
}

/** What is wrong with a name, or null. */
function nameProblem(walk: Walk, name: string, part: "species" | "solids" | "analytes"): Pick<Issue, "code" | "message" | "remedy"> | null {
  if (!/^[^\s/:~"][^/:~"]*$/.test(name) || name.trim() !== name) return { code: "unreadable-name", message: `“${shorten(name)}” cannot be a name.`, remedy: "Leave out / : ~ \" and spaces at the ends." };
  const { extend } = walk;
  const clash = part === "analytes" ? BUILT_IN.analytes.some((a) => a.key === name) || TAKEN_KEYS.has(name)
    : BUILT_IN.species.some((s) => s.name === name) || BUILT_IN.solids.some((s) => s.name === name) || name === "H2O" || /^H?\d?Org(\^|$)/.test(name)
      || (part === "solids" && Object.hasOwn(extend.species ?? {}, name)) || (part === "species" && Object.values(extend.analytes ?? {}).some((a) => a.species === name));
  return clash ? { code: "name-clash", message: `“${name}” is there already.`, remedy: part === "analytes" ? "Choose another key." : "Choose another name; a log K is replaced by a case's constants." } : null;
}

/** The free species of an analyte, a component of its own. */
function readComponent(walk: Walk, key: string, own: OwnAnalyte): Species {
  const { issues, elements, atoms, extend } = walk;
  const at = (...path: string[]) => pointerTo(["extend", "analytes", key, ...path]);
  const wrong = nameProblem(walk, key, "analytes");
  if (wrong) issues.push({ pointer: at(), value: shorten(key), ...wrong });
  const name = own.species;
  const isTwice = Object.entries(extend.analytes ?? {}).find(([, each]) => each.species === name)?.[0] !== key;
  if (isTwice || BUILT_IN.species.some((s) => s.name === name) || name === "H2O") {
    issues.push({ pointer: at("species"), code: "name-clash", message: `“${shorten(name)}” is a species already; an analyte brings a new one.`, value: shorten(name), remedy: "Name the free species that this analyte is the total of." });
  } else if (!/^[^\s/:~"]+$/.test(name)) {
    issues.push({ pointer: at("species"), code: "unreadable-name", message: `“${shorten(name)}” cannot be a name.`, value: shorten(name), remedy: "Write a formula with its charge, such as X^- or Zn^2+." });
  }
  const read = readComposition(name, own.formula, elements);
  if ("unknown" in read) issues.push({ pointer: at(own.formula === undefined ? "species" : "formula"), value: shorten(own.formula ?? name), ...atomProblems(read.unknown, own.formula ?? name, true) });
  const composition = "unknown" in read ? {} : read.atoms;
  if (!atoms.has(name)) atoms.set(name, composition);
  const charge = chargeOf(name);
  return {
    name, charge, composition, reaction: null, logK: null, ionSize: charge === 0 ? null : own.ionSize ?? 4, truesdellJones: null, isComplex: false,
    conductance: own.conductance ?? null,
  };
}

function readFormed(walk: Walk): Species[] {
  const { extend, issues, atoms } = walk;
  const own = Object.entries(extend.species ?? {});
  // Compositions follow reactions, so each waits for what it is formed from; what never comes is circular or unknown.
  const waiting = new Map(own);
  for (let isMoving = true; isMoving;) {
    isMoving = false;
    for (const [name, { from }] of waiting) {
      if (!Object.keys(from).every((term) => atoms.has(term) && (term !== name))) continue;
      waiting.delete(name);
      if (!atoms.has(name)) atoms.set(name, sumAtoms(from, atoms));
      isMoving = true;
    }
  }
  for (const [name, { from }] of waiting) {
    const stuck = Object.keys(from).filter((term) => !atoms.has(term) || term === name);
    const isCircular = stuck.every((term) => waiting.has(term));
    if (isCircular) issues.push({ pointer: pointerTo(["extend", "species", name, "from"]), code: "circular", message: `“${shorten(name)}” is formed, in the end, from itself.`, value: stuck.map(shorten).join(", "), remedy: "Form one of them from species that are there." });
  }
  return own.map(([name, each]) => readSpecies(walk, name, each));
}

function readSpecies(walk: Walk, name: string, own: OwnSpecies): Species {
  const { issues, atoms } = walk;
  const path = ["extend", "species", name];
  const wrong = nameProblem(walk, name, "species");
  if (wrong) issues.push({ pointer: pointerTo(path), value: shorten(name), ...wrong });
  const charge = chargeOf(name);
  checkTerms(walk, [...path, "from"], own.from, "CO2(g)");
  const composition = own.from && termsKnown(own.from, atoms) ? sumAtoms(own.from, atoms) : {};
  checkBalance(walk, { path, at: "from", terms: own.from, name, formula: own.formula, composition, charge });
  const { logK, issues: found } = readLogK(own, path);
  issues.push(...found);
  const elements = Object.keys(composition);
  const hasMetal = elements.some((e) => walk.metals.has(e));
  return {
    name, charge, composition, reaction: { ...Object.fromEntries(Object.entries(own.from).map(([term, count]) => [term, -count])), [name]: 1 }, logK,
    ionSize: charge === 0 ? null : own.ionSize ?? 4, truesdellJones: null,
    isComplex: hasMetal && elements.some((e) => !walk.metals.has(e) && e !== "H" && e !== "O"), conductance: own.conductance ?? null,
  };
}

function readSolid(walk: Walk, name: string, own: OwnSolid): Solid {
  const { issues, atoms, elements } = walk;
  const path = ["extend", "solids", name];
  const wrong = nameProblem(walk, name, "solids");
  if (wrong) issues.push({ pointer: pointerTo(path), value: shorten(name), ...wrong });
  checkTerms(walk, [...path, "into"], own.into, null);
  const composition = termsKnown(own.into, atoms) ? sumAtoms(own.into, atoms) : {};
  // A solid's name need be no formula; where a formula is given it is held to it.
  checkBalance(walk, { path, at: "into", terms: own.into, name: own.formula ?? "", formula: own.formula, composition, charge: 0 });
  const { logK, issues: found } = readLogK(own, path);
  issues.push(...found);
  return { name, formula: own.formula ?? name, molarMass: massOf(composition, elements), composition, reaction: { ...own.into }, logK, conservedWithout: [] };
}

function readAnalyte(walk: Walk, key: string, own: OwnAnalyte, component: Species, takingProtons: ReadonlySet<string>): Analyte {
  const formula = own.formula ?? component.name.replace(/\^\d*[+-]$/, "");
  const mass = massOf(component.composition, walk.elements);
  if (own.molarMass !== undefined && mass > 0 && Math.abs(own.molarMass / mass - 1) > 2e-3) {
    walk.issues.push({ pointer: pointerTo(["extend", "analytes", key, "molarMass"]), code: "contradiction", message: `${formula} has a molar mass of ${mass.toFixed(3)} g/mol.`, value: String(own.molarMass), remedy: "Leave molarMass out, or name another formula." });
  }
  const isStrong = own.strong ?? (component.charge > 0 || !takingProtons.has(component.name));
  return {
    key, synonyms: [key.toLowerCase()], kind: "total", component: component.name, formula, molarMass: own.molarMass ?? mass,
    strongCharge: isStrong ? component.charge : 0, defaultUnit: own.defaultUnit ?? "mg/L", description: own.description ?? key,
  };
}

/** Own components of which some species holds protons as well. */
function protonTakers(components: readonly Species[], formed: readonly Species[]): Set<string> {
  const takers = new Set<string>();
  try {
    const names = [...BUILT_IN.species, ...components].filter((s) => s.reaction === null).map((s) => s.name);
    const all = [...BUILT_IN.species, ...formed].filter((s) => s.reaction !== null && s.name !== "CO2(g)");
    const basis = makeBasis(names, all.map((s) => ({ name: s.name, reaction: s.reaction! })));
    const h = names.indexOf("H^+");
    for (const { name } of formed) {
      const { nu } = basis.forms.get(name)!;
      if (nu[h] > 0) components.forEach((c) => { if (nu[names.indexOf(c.name)] > 0) takers.add(c.name); });
    }
  } catch { /* a faulty reaction has been named already */ }
  return takers;
}

/** Strong metals of a carbonate solid do not count as bases while it is in excess. */
function withConserved(solid: Solid, analytes: readonly Analyte[]): Solid {
  const isCarbonate = ["CO3^2-", "HCO3^-", "CO2(aq)"].some((name) => (solid.reaction[name] ?? 0) > 0);
  if (!isCarbonate) return solid;
  return { ...solid, conservedWithout: analytes.filter((a) => a.strongCharge > 0 && a.component !== null && (solid.reaction[a.component] ?? 0) > 0).map((a) => a.key) };
}

const termsKnown = (terms: Record<string, number>, atoms: ReadonlyMap<string, Atoms>): boolean => Object.keys(terms).every((term) => atoms.has(term));

function sumAtoms(terms: Record<string, number>, atoms: ReadonlyMap<string, Atoms>): Atoms {
  const sum: Atoms = {};
  for (const [term, count] of Object.entries(terms)) {
    for (const [element, n] of Object.entries(atoms.get(term) ?? {})) sum[element] = (sum[element] ?? 0) + count * n;
  }
  return Object.fromEntries(Object.entries(sum).filter(([, n]) => Math.abs(n) > 1e-9));
}

function checkTerms(walk: Walk, path: string[], terms: Record<string, number>, refused: string | null): void {
  const { issues, atoms, extend } = walk;
  if (Object.keys(terms).length === 0) issues.push({ pointer: pointerTo(path), code: "missing", message: "A reaction needs at least one species.", remedy: "Write { \"Ca^2+\": 1, … }." });
  for (const [term, count] of Object.entries(terms)) {
    const pointer = pointerTo([...path, term]);
    if (!Number.isFinite(count) || count === 0) issues.push({ pointer, code: "out-of-range", message: "A count is a number other than 0.", value: String(count), remedy: "Leave the species out, or give its count." });
    if (term === refused || (!atoms.has(term) && !Object.hasOwn(extend.species ?? {}, term))) {
      const nearest = nearestName(term, [...atoms.keys()].filter((name) => name !== refused));
      issues.push({ pointer, code: "unknown-species", message: `No species is called “${shorten(term)}”.`, value: shorten(term), remedy: nearest ? `Did you mean “${nearest}”?` : "Name a species of the constants set or one of your own; a new free ion comes with an analyte." });
    }
  }
}

interface Balance { path: string[]; at: string; terms: Record<string, number>; name: string; formula: string | undefined; composition: Atoms; charge: number }

function checkBalance(walk: Walk, { path, at, terms, name, formula, composition, charge }: Balance): void {
  const { issues, atoms, elements } = walk;
  if (!termsKnown(terms, atoms)) return;
  const sum = Object.entries(terms).reduce((total, [term, count]) => total + count * chargeOf(term), 0);
  const signed = (z: number) => (z > 0 ? `+${z}` : `${z}`);
  if (Math.abs(sum - charge) > 1e-9) issues.push({ pointer: pointerTo([...path, at]), code: "unbalanced-charge", message: `The charges do not balance: ${signed(charge)} on one side, ${signed(sum)} on the other.`, remedy: "Add what is missing, such as H^+ or H2O, or write the charge into the name (^2+)." });
  if (name === "") return;
  const read = readComposition(name, formula, elements);
  if ("unknown" in read) { issues.push({ pointer: pointerTo(formula === undefined ? path : [...path, "formula"]), value: shorten(formula ?? name), ...atomProblems(read.unknown, formula ?? name, false) }); return; }
  const named = read.atoms;
  const off = [...new Set([...Object.keys(named), ...Object.keys(composition)])].filter((e) => Math.abs((named[e] ?? 0) - (composition[e] ?? 0)) > 1e-9);
  if (off.length > 0) issues.push({ pointer: pointerTo([...path, at]), code: "unbalanced-elements", message: `The atoms do not balance: ${off.map((e) => `${e} ${composition[e] ?? 0} in the reaction, ${named[e] ?? 0} in ${formula ?? name}`).join("; ")}.`, remedy: "Correct the counts or the formula." });
}
