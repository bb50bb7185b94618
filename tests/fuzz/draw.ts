/**
 * Waters and cases over the whole allowed input, hostile corners on purpose: totals from 1e-12 to 0.5 mol/kg, no ions or one, pH 0 to 14
 * (and a little beyond), pCO2 from 1e-8 to 10 atm, all solids at once, both ends of the temperatures. Row r of a seed is always the same.
 */
import { SOLIDS, SPECIES } from "@/lib/chemistry/data";
import { logKAt } from "@/lib/chemistry/temperature";
import type { ActivityModel, CarbonFact, ProtonFact, ResolvedCase, ResolvedSolid, ResolvedWater } from "@/lib/chemistry/types";

/** Waters that share a case: building a case costs more than solving a water. */
export const WATERS_PER_CASE = 8;

type Fact = ProtonFact | CarbonFact;
const PAIRS: readonly (readonly [Fact, Fact])[] = [
  ["charge", "pCO2"], ["ANC", "pCO2"], ["alkalinity", "pCO2"], ["pH", "pCO2"], ["charge", "DIC"], ["ANC", "DIC"], ["alkalinity", "DIC"], ["pH", "DIC"],
  ["charge", "saturated"], ["ANC", "saturated"], ["alkalinity", "saturated"], ["pH", "saturated"], ["pH", "charge"], ["pH", "ANC"], ["pH", "alkalinity"], ["DIC", "pCO2"],
];
const MODELS: readonly ActivityModel[] = ["ideal", "guntelberg", "davies", "debye-huckel", "truesdell-jones"];
const KEYS = ["Na", "K", "NH4", "Ca", "Mg", "Sr", "Ba", "Al", "Cl", "NO3", "NO2", "SO4", "F", "PO4", "Si"] as const;
const CHARGES: Record<(typeof KEYS)[number], number> = { Na: 1, K: 1, NH4: 1, Ca: 2, Mg: 2, Sr: 2, Ba: 2, Al: 3, Cl: -1, NO3: -1, NO2: -1, SO4: -2, F: -1, PO4: -1, Si: 0 };
const COMPLEXES = SPECIES.filter((s) => s.isComplex).map((s) => s.name);
const FORMED = SPECIES.filter((s) => s.logK).map((s) => ({ name: s.name, logK: s.logK! }));

/** Counter-based numbers (splitmix32 over seed, stream and counter). */
function makeRandom(seed: number, stream: number) {
  let counter = 0;
  const next = (): number => {
    let z = (Math.imul(seed, 0x9e3779b9) + Math.imul(stream, 0x85ebca6b) + Math.imul(++counter, 0xc2b2ae35)) | 0;
    z = Math.imul(z ^ (z >>> 16), 0x21f0aaad);
    z = Math.imul(z ^ (z >>> 15), 0x735a2d97);
    return ((z ^ (z >>> 15)) >>> 0) / 2 ** 32;
  };
  const between = (a: number, b: number) => a + (b - a) * next();
  return {
    between, chance: (p: number) => next() < p, log: (a: number, b: number) => Math.exp(between(Math.log(a), Math.log(b))),
    pick: <T>(list: readonly T[]): T => list[Math.floor(next() * list.length)],
  };
}
type Random = ReturnType<typeof makeRandom>;

function drawOrganic(r: Random): ResolvedCase["organic"] {
  if (r.chance(0.5)) return { model: "none", pKa: [], sitesPerMgC: 0 };
  const model = r.pick(["oliver-1983", "hruska-2003", "driscoll-1994", "own"] as const);
  if (model === "oliver-1983") return { model, pKa: [], sitesPerMgC: 1e-5 };
  if (model === "hruska-2003") return { model, pKa: [3.04, 4.51, 6.46], sitesPerMgC: 8.6e-6 };
  if (model === "driscoll-1994") return { model, pKa: [2.62, 5.66, 5.94], sitesPerMgC: 0.055e-3 / 12.011 };
  const pKa = Array.from({ length: 1 + Math.floor(r.between(0, 6)) }, () => r.between(-1, 13)).sort((a, b) => a - b);
  return { model, pKa, sitesPerMgC: r.log(1e-7, 1e-4) };
}

function drawComplexes(r: Random): ResolvedCase["complexes"] {
  if (r.chance(0.75)) return "all";
  return r.chance(0.4) ? "none" : COMPLEXES.filter(() => r.chance(0.5));
}

/** Shifts of constants by up to a factor of ten; and, now and then, solids that depend on each other with targets that agree. */
function drawConstants(r: Random): ResolvedCase["constants"] {
  const constants: ResolvedCase["constants"] = {};
  if (r.chance(0.15)) for (const { name, logK } of FORMED) if (r.chance(0.1)) constants[name] = { logK: logKAt(logK, 25) + r.between(-1, 1) };
  if (r.chance(0.12)) {
    Object.assign(constants, { calcite: { logK: -8.5 }, aragonite: { logK: r.chance(0.5) ? -8.5 : -8.3 }, celestite: { logK: -6.6 }, anhydrite: { logK: -4.35 },
      gypsum: { logK: r.chance(0.5) ? -4.35 : -4.6 }, strontianite: { logK: -10.75 }, gibbsite: { logK: 8 }, "Al(OH)3 (amorphous)": { logK: 8 } });
  }
  return constants;
}

function drawSolids(r: Random): ResolvedSolid[] {
  const share = r.pick([0, 0.08, 0.08, 0.2, 0.2, 0.5, 1]);
  const mostlyFlexible = r.chance(0.6);
  const isPlain = r.chance(0.6);
  return SOLIDS.filter(() => r.chance(share)).map(({ name, logK }): ResolvedSolid => {
    const roll = r.between(0, 1);
    const supply = roll < (mostlyFlexible ? 0.15 : 0.5) ? "excess" as const : roll < 0.7 ? "may-form" as const : r.chance(0.03) ? 0 : r.log(1e-9, 0.5);
    return { name, supply, saturation: isPlain || r.chance(0.5) ? 0 : r.between(-3, 3), logK: !isPlain && r.chance(0.05) ? logKAt(logK, 25) + r.between(-1, 1) : null };
  });
}

export function drawCase(seed: number, index: number): ResolvedCase {
  const r = makeRandom(seed, 2 * index);
  const facts = PAIRS[index % PAIRS.length];
  const hasPressure = facts.includes("pCO2");
  const isSaturated = facts.includes("saturated");
  const gas = r.pick(hasPressure ? ["closed", "open", "given"] as const : ["closed", "given"] as const);
  return {
    name: `case ${index}`,
    close: { facts: [facts[0], facts[1]], saturated: isSaturated ? { solid: r.chance(0.5) ? "calcite" : r.pick(SOLIDS).name, SI: r.chance(0.3) ? 0 : r.between(-6, 1) } : null },
    given: {}, activity: r.pick(MODELS), organic: drawOrganic(r), complexes: drawComplexes(r), constants: drawConstants(r),
    react: r.chance(0.4) ? null : { gas: gas === "given" ? { atm: r.log(1e-8, 10) } : gas, solids: drawSolids(r) },
  };
}

function drawTotals(r: Random): Record<string, number> {
  const kind = r.pick(["plain", "plain", "wide", "wide", "one", "none", "ends", "brine"] as const);
  const totals: Record<string, number> = {};
  if (kind === "none") return totals;
  if (kind === "one") { totals[r.pick(KEYS)] = r.log(1e-12, 0.5); return totals; }
  const share = r.pick([0.3, 0.7, 1]);
  for (const key of KEYS) {
    if (!r.chance(share)) continue;
    totals[key] = kind === "plain" ? r.log(1e-6, 1e-2) : kind === "wide" ? r.log(1e-12, 0.5) : kind === "brine" ? r.log(1e-3, 0.5) : r.pick([1e-12, 0.5, 0]);
  }
  if (kind === "ends" || r.chance(0.3)) return totals;
  // Bring the ions near electroneutrality, as in a real water.
  let charge = 0;
  for (const key of KEYS) charge += CHARGES[key] * (totals[key] ?? 0);
  const gap = charge - r.between(-1, 1) * r.log(1e-6, 1e-2);
  const filler = gap > 0 ? "Cl" : "Na";
  totals[filler] = Math.min((totals[filler] ?? 0) + Math.abs(gap), 0.5);
  return totals;
}

const signed = (r: Random, share: number, low: number, high: number) => (r.chance(share) ? 1 : -1) * r.log(low, high);

export function drawWater(seed: number, row: number): ResolvedWater {
  const r = makeRandom(seed, 2 * row + 1);
  const isPlain = r.chance(0.6);
  const temperature = r.pick([0, 90, 25, r.between(0, 90), r.between(0, 30)]);
  const hasAltitude = r.chance(0.1);
  const water: ResolvedWater = {
    id: `${row}`, site: null, date: null, temperature,
    pH: isPlain ? r.between(4.5, 10) : r.chance(0.9) ? r.between(0, 14) : r.between(-2, 16),
    pHTemperature: r.chance(0.15) ? r.pick([0, 20, 25, 90]) : null,
    altitude: hasAltitude ? r.between(0, 5000) : null, pressureAtm: hasAltitude && r.chance(0.3) ? r.between(0.6, 1.1) : null, conductivity: null,
    totals: drawTotals(r),
    alkalinity: isPlain ? r.log(1e-5, 1e-2) : signed(r, 0.7, 1e-9, 0.5), ANC: isPlain ? r.log(1e-5, 1e-2) : signed(r, 0.6, 1e-9, 0.5),
    DIC: isPlain ? r.log(1e-5, 1e-2) : r.chance(0.03) ? 0 : r.log(1e-12, 0.5), DOC: r.chance(0.1) ? null : r.chance(0.1) ? 0 : r.log(0.01, isPlain ? 40 : 1e4),
    pCO2: { atm: isPlain ? r.log(1e-5, 0.1) : r.log(1e-8, 10) }, aluminiumFractionGiven: true, faults: [], warnings: [],
  };
  if (hasAltitude && water.pCO2 && "atm" in water.pCO2) water.pCO2 = { dryFraction: Math.min(water.pCO2.atm, 1) };
  if (r.chance(0.02)) spoil(r, water);
  return water;
}

/** A value that no row may have, or none where one is needed. */
function spoil(r: Random, water: ResolvedWater): void {
  const what = r.pick(["temperature", "hot", "pH", "pCO2", "DIC", "alkalinity", "total", "ANC"] as const);
  if (what === "temperature") water.temperature = null;
  else if (what === "hot") water.temperature = r.pick([-1, 91, 1e6]);
  else if (what === "pH") water.pH = r.pick([null, -3, 17]);
  else if (what === "pCO2") water.pCO2 = r.pick([null, { atm: 0 }]);
  else if (what === "DIC") water.DIC = r.pick([null, -1e-3]);
  else if (what === "alkalinity") water.alkalinity = null;
  else if (what === "ANC") water.ANC = null;
  else water.totals[r.pick(KEYS)] = -1e-3;
}
