/**
 * Random waters for the independent check: each one a job spec of its own and the same thing said to the independent solver.
 * Seeded, so that a failure can be looked at again: draw(seed) is always the same water.
 */
import type { Master, PlainSpecies } from "./independent-constants";
import { PLAIN_SPECIES } from "./independent-constants";
import { type PlainOutcome, type PlainSupply, react, strongIons } from "./independent-reaction";
import { NoState, type PlainFact, type PlainModel, type PlainOrganic, type PlainProblem, type PlainState, solidLogK, solveState } from "./independent-solver";

export interface Draw {
  seed: number;
  label: string;
  spec: Record<string, unknown>;
  /** The independent answer, or the reason why there is none. */
  answer(): PlainOutcome | string;
  /** What the two facts alone ask, where nothing else happens to the water; else null. */
  problem: PlainProblem | null;
}

/** Small counter-based generator (splitmix32 over seed and counter). */
function makeRandom(seed: number) {
  let counter = 0;
  const next = (): number => {
    let z = (Math.imul(seed, 0x9e3779b9) + Math.imul(++counter, 0x85ebca6b)) | 0;
    z = Math.imul(z ^ (z >>> 16), 0x21f0aaad);
    z = Math.imul(z ^ (z >>> 15), 0x735a2d97);
    return ((z ^ (z >>> 15)) >>> 0) / 2 ** 32;
  };
  const between = (a: number, b: number) => a + (b - a) * next();
  return {
    between, chance: (p: number) => next() < p,
    log: (a: number, b: number) => Math.exp(between(Math.log(a), Math.log(b))),
    pick: <T>(list: readonly T[]): T => list[Math.floor(next() * list.length)],
  };
}
type Random = ReturnType<typeof makeRandom>;

const rounded = (x: number, digits = 9) => Number(x.toPrecision(digits));
const MODELS: readonly PlainModel[] = ["ideal", "guntelberg", "davies", "debye-huckel", "truesdell-jones"];
const ROW_KEYS: readonly Master[] = ["Ca", "Mg", "Na", "K", "NH4", "Sr", "Ba", "Al", "Cl", "NO3", "NO2", "SO4", "F", "PO4", "Si"];
/** mmol/L, lowest and highest. */
const RANGES: Record<"fresh" | "acid" | "saline" | "sulphate", Partial<Record<Master, [number, number]>>> = {
  fresh: { Ca: [0.02, 3], Mg: [0.01, 1], Na: [0.03, 2], K: [0.005, 0.2], Cl: [0.02, 1], SO4: [0.02, 1], NO3: [0.005, 0.5], F: [1e-4, 0.02], Si: [0.01, 0.4], NH4: [1e-4, 0.05], Sr: [1e-4, 0.01], Ba: [1e-5, 1e-3], PO4: [1e-5, 0.01], NO2: [1e-5, 0.01], Al: [1e-6, 1e-3] },
  acid: { Ca: [0.005, 0.1], Mg: [0.005, 0.1], Na: [0.03, 0.5], K: [0.002, 0.05], Cl: [0.03, 0.3], SO4: [0.02, 0.3], NO3: [1e-3, 0.1], F: [1e-3, 0.01], Si: [0.01, 0.2], Al: [1e-3, 0.05] },
  saline: { Ca: [1, 10], Mg: [1, 20], Na: [20, 150], K: [0.3, 5], Cl: [20, 150], SO4: [1, 15], F: [0.01, 0.1], Si: [0.05, 0.5], Sr: [0.01, 0.1] },
  sulphate: { Ca: [3, 12], Mg: [0.5, 5], Na: [0.2, 5], K: [0.05, 0.5], Cl: [0.2, 3], SO4: [3, 14], Si: [0.05, 0.4], Sr: [0.01, 0.1], Ba: [1e-5, 1e-4], F: [0.005, 0.05] },
};
const PROTON = ["charge", "ANC", "alkalinity", "pH"] as const;
const CARBON = ["pCO2", "DIC", "saturated"] as const;
type FactName = (typeof PROTON)[number] | (typeof CARBON)[number];
export const PAIRS: readonly (readonly [FactName, FactName])[] = [
  ...PROTON.flatMap((proton) => CARBON.map((carbon) => [proton, carbon] as const)),
  ["pH", "charge"], ["pH", "ANC"], ["alkalinity", "pH"], ["DIC", "pCO2"],
];

function drawTotals(random: Random, kind: keyof typeof RANGES): Partial<Record<Master, number>> {
  const totals: Partial<Record<Master, number>> = {};
  for (const m of ROW_KEYS) {
    const range = RANGES[kind][m];
    const isMajor = ["Ca", "Mg", "Na", "Cl", "SO4"].includes(m);
    if (range && random.chance(isMajor ? 0.93 : 0.6)) totals[m] = rounded(random.log(range[0], range[1]), 5) / 1000;
  }
  // Bring the strong ions to a wanted ANC with sodium or chloride, as a real water's own balance would.
  const wanted = kind === "acid" ? random.between(-8e-5, 1e-4) : random.log(3e-5, kind === "fresh" ? 6e-3 : 4e-3);
  const gap = wanted - strongIons(totals);
  const filler: Master = gap > 0 ? "Na" : "Cl";
  totals[filler] = rounded(((totals[filler] ?? 0) + Math.abs(gap)) * 1000, 9) / 1000;
  return totals;
}

function drawOrganic(random: Random, kind: string): { organic: PlainOrganic; document: unknown; DOC: number | null } {
  const choice = random.pick(["none", "none", "oliver-1983", "hruska-2003", "driscoll-1994", "own"] as const);
  if (choice === "none" || kind === "saline") return { organic: { kind: "none" }, document: { model: "none" }, DOC: null };
  const DOC = rounded(random.log(0.5, 30), 4);
  if (choice === "oliver-1983") return { organic: { kind: "oliver", acid: 1e-5 * DOC }, document: { model: choice }, DOC };
  if (choice === "hruska-2003") return { organic: { kind: "steps", acid: 8.6e-6 * DOC / 3, pK: [3.04, 4.51, 6.46] }, document: { model: choice }, DOC };
  if (choice === "driscoll-1994") return { organic: { kind: "steps", acid: 0.055 * DOC / 12011 / 3, pK: [2.62, 5.66, 5.94] }, document: { model: choice }, DOC };
  const pK = random.chance(0.5) ? [3.5, 5.2] : [4.3];
  const sites = rounded(random.between(4, 14), 3);
  return { organic: { kind: "steps", acid: sites * 1e-6 * DOC / pK.length, pK }, document: { pKa: pK, sites: `${sites} ueq/mg` }, DOC };
}

const PAIR_NAMES = PLAIN_SPECIES.filter((each) => each.pair).map((each) => each.name);

function drawComplexes(random: Random): { document: unknown; omit: Set<string> } {
  const roll = random.between(0, 1);
  if (roll < 0.7) return { document: "all", omit: new Set() };
  if (roll < 0.85) return { document: "none", omit: new Set(PAIR_NAMES) };
  const kept = PAIR_NAMES.filter(() => random.chance(0.5));
  return { document: kept, omit: new Set(PAIR_NAMES.filter((name) => !kept.includes(name))) };
}

interface Meeting { document: Record<string, unknown>; pressure: number | null; supplies: PlainSupply[] }

function drawMeeting(random: Random, hasPressure: boolean, pCO2: number, kind: string): Meeting | null {
  if (random.chance(0.35)) return null;
  const gas = random.pick(hasPressure ? ["closed", "open", "given"] as const : ["closed", "given"] as const);
  const given = rounded(random.log(1e-4, 0.05), 5);
  const pressure = gas === "closed" ? null : gas === "open" ? pCO2 : given;
  const pool = [
    random.pick(["calcite", "calcite", "aragonite", "vaterite"]), "gypsum", random.pick(["gibbsite", "Al(OH)3 (amorphous)", "Al(OH)3 (microcrystalline)"]),
    random.pick(["amorphous silica", "quartz"]), "barite", "strontianite", "fluorite",
  ];
  const chances = [0.75, 0.3, 0.35, 0.15, 0.15, 0.12, 0.15];
  const solids: Record<string, unknown> = {};
  const supplies: PlainSupply[] = [];
  pool.forEach((solid, k) => {
    if (!random.chance(chances[k]) || (kind === "saline" && solid === "gypsum")) return;
    const way = random.pick(["excess", "may-form", "finite"] as const);
    const SI = random.chance(0.7) ? 0 : rounded(random.between(-0.4, 0.6), 3);
    const amount = rounded(random.log(0.002, 2), 4);
    supplies.push({ solid, SI, supply: way === "finite" ? amount / 1000 : way });
    solids[solid] = { supply: way === "finite" ? `${amount} mmol/L` : way, ...(SI === 0 ? {} : { saturation: SI }) };
  });
  return { document: { gas: gas === "given" ? `${given} atm` : gas, solids }, pressure, supplies };
}

/** What the facts are called in the spec, and where their values go. */
function stateFacts(names: readonly [FactName, FactName], state: PlainState, random: Random): { facts: PlainFact[]; close: unknown[]; row: Record<string, unknown>; kase: Record<string, unknown> } {
  const row: Record<string, unknown> = {};
  const kase: Record<string, unknown> = {};
  const close: unknown[] = [];
  const strong = strongIons(state.problem.totals);
  const facts = names.map((name): PlainFact => {
    if (name === "saturated") {
      const solid = random.pick(["calcite", "calcite", "aragonite", "dolomite"].filter((each) => state.SI[each] !== null));
      const SI = rounded((state.SI[solid] ?? 0) + random.between(-0.3, 0.3), 4);
      close.push({ saturated: solid, SI });
      return { is: "saturated", solid, value: SI };
    }
    close.push(name);
    switch (name) {
      case "charge": return { is: "charge", value: 0 };
      case "ANC": {
        // Not the ions' own sum: some charge then stays over.
        const ANC = rounded((strong - state.charge) * 1e3 * random.between(0.98, 1.02));
        row.ANC = `${ANC} meq/L`;
        return { is: "charge", value: strong - ANC / 1e3 };
      }
      case "alkalinity": { const value = rounded(state.alkalinity * 1e3); row.alkalinity = `${value} meq/L`; return { is: name, value: value / 1e3 }; }
      case "pH": { const value = rounded(state.pH); row.pH = value; return { is: name, value }; }
      case "pCO2": { const value = rounded(state.pCO2); kase.pCO2 = `${value} atm`; return { is: name, value }; }
      case "DIC": { const value = rounded(state.DIC * 1e3); row.DIC = `${value} mmol/L`; return { is: name, value: value / 1e3 }; }
    }
  });
  return { facts, close, row, kase };
}

/** Whether the carbon can be read from pH with a balance at all: carbonate's share of the charges. */
function carbonShare(state: PlainState): number {
  let all = 0;
  let carbon = 0;
  for (const each of PLAIN_SPECIES as readonly PlainSpecies[]) {
    const part = Math.abs(each.z) * (state.conc[each.name] ?? 0);
    all += part;
    if (each.parts.CO3) carbon += part;
  }
  return carbon / all;
}

/** The water of a seed; null where the seed's own conditions admit no water (it is then skipped, and counted). */
export function draw(seed: number): Draw | null {
  const random = makeRandom(seed);
  const kind = random.pick(["fresh", "fresh", "fresh", "acid", "saline", "sulphate"] as const);
  const totals = drawTotals(random, kind);
  const celsius = rounded(random.between(0, random.chance(0.7) ? 30 : 90), 4);
  const model = random.pick(kind === "saline" ? MODELS.slice(1) : MODELS);
  const { organic, document: organicDocument, DOC } = drawOrganic(random, kind);
  const complexes = drawComplexes(random);
  const constants: Record<string, { logK: number }> = random.chance(0.15) ? { calcite: { logK: rounded(random.between(-8.8, -8.2), 4) } } : {};
  const names = PAIRS[seed % PAIRS.length];
  const measuredAt = names.includes("pH") && random.chance(0.4) ? rounded(random.between(5, 30), 4) : celsius;
  const base = {
    model, omit: complexes.omit, organic, totals, logK: Object.fromEntries(Object.entries(constants).map(([name, { logK }]) => [name, logK])), held: [],
  };
  let reference: PlainState;
  try {
    const facts = [{ is: "charge", value: 0 }, { is: "pCO2", value: random.log(1e-4, 0.08) }] as const;
    reference = solveState({ ...base, celsius: measuredAt, facts });
  } catch (error) {
    if (error instanceof NoState) return null;
    throw error;
  }
  if (names.includes("saturated") && reference.SI.calcite === null) return null;
  if (names.includes("pH") && names.some((name) => name === "charge" || name === "ANC" || name === "alkalinity") && carbonShare(reference) < 1e-3) return null;
  const { facts, close, row, kase } = stateFacts(names, reference, random);
  const meeting = drawMeeting(random, names.includes("pCO2"), Number.parseFloat(String(kase.pCO2 ?? "NaN")), kind);
  const problem: PlainProblem = { ...base, celsius: measuredAt, facts: [facts[0], facts[1]] };
  const spec = {
    spec: 1, title: `random water ${seed}`,
    waters: {
      missing: "zero",
      rows: [{
        id: `R${seed}`, temperature: celsius, ...(measuredAt === celsius ? {} : { pHTemperature: measuredAt }), ...row, ...(DOC === null ? {} : { DOC: `${DOC} mg/L` }),
        ...Object.fromEntries(Object.entries(totals).map(([m, value]) => [m, `${rounded(value * 1000, 12)} mmol/L`])),
      }],
    },
    cases: [{
      name: "c", close, activity: model, organic: organicDocument, complexes: complexes.document, ...kase,
      ...(Object.keys(constants).length > 0 ? { constants } : {}), ...(meeting ? { react: meeting.document } : {}),
    }],
    report: ["pH", "pCO2", "DIC", "ionicStrength", "ANC", "alkalinity", "chargeError", "species", "activities", "SI", "solids", "gas:CO2"],
  };
  const answer = (): PlainOutcome | string => {
    try {
      const first = solveState(problem);
      if (meeting) return react(first, celsius, meeting.pressure, meeting.supplies);
      return measuredAt === celsius ? { state: first, dissolved: {}, gasTaken: 0 } : react(first, celsius, null, []);
    } catch (error) {
      if (error instanceof NoState) return error.message;
      throw error;
    }
  };
  const solids = meeting?.supplies.map((each) => `${each.solid} ${typeof each.supply === "number" ? "finite" : each.supply}`).join(" + ");
  const label = `${kind}, ${close.map((each) => (typeof each === "string" ? each : "saturated")).join(" + ")}, ${model}, ${celsius} °C${meeting ? `, ${meeting.document.gas}${solids ? `, ${solids}` : ""}` : ""}`;
  return { seed, label, spec, answer, problem: meeting || measuredAt !== celsius ? null : problem };
}

export { solidLogK };
