/** pH standards and solutions of known pH, and mean activity coefficients. */
import type { PublishedCheck } from "./published-checks";
import { solveOneWater, solveSpec } from "./solve-spec";

const NIST = "NIST/IUPAC primary pH standards (Bates; Buck et al. 2002, Pure Appl. Chem. 74:2169)";
const ROBINSON = "Robinson & Stokes 1959, Electrolyte Solutions, mean activity coefficients";
const noCarbon = { close: ["charge", "DIC"] };
const MODELS = ["guntelberg", "davies", "debye-huckel", "truesdell-jones"] as const;
const ONE_GAMMA = "pH standards rest on a conventional single-ion coefficient, good to 0.01 at I ≤ 0.1; the activity models differ by a few hundredths there";

type Row = Record<string, unknown>;
const pHOf = (row: Row, kase: Row = {}): number => solveOneWater({ DIC: "0 mmol/L", ...row }, { ...noCarbon, ...kase }, ["pH"]).pH;

/** pH of a water whose spec brings an acid of its own. */
function pHWith(extend: Row, row: Row, activity: string): number {
  const [solved] = solveSpec({ spec: 1, extend, waters: { missing: "zero", rows: [{ id: "w", DIC: "0 mmol/L", ...row }] }, cases: [{ name: "c", ...noCarbon, activity }], report: ["pH"] });
  if (solved.status !== "ok") throw new Error(solved.message);
  return solved.values.pH;
}

/** B(OH)3 + H2O = B(OH)4^- + H^+, pK = 2237.94/T + 0.016883·T − 3.305 (Owen 1934, J. Am. Chem. Soc. 56:1695). */
const BORATE = {
  analytes: { B: { species: "B(OH)3", formula: "B(OH)3" } },
  species: { "B(OH)4^-": { from: { "B(OH)3": 1, H2O: 1, "H^+": -1 }, a: 3.305, "c/T": -2237.94, bT: -0.016883 } },
};
/** Phthalic acid, pK1 2.950 and pK2 5.408 at 25 °C (Hamer & Acree 1945, J. Res. NBS 35:381 and 539). */
const PHTHALATE = {
  analytes: { Ph: { species: "Ph^2-", formula: "C8H4O4" } },
  species: { "HPh^-": { from: { "H^+": 1, "Ph^2-": 1 }, formula: "C8H5O4", logK: 5.408 }, H2Ph: { from: { "H^+": 2, "Ph^2-": 1 }, formula: "C8H6O4", logK: 8.358 } },
};

interface Series { what: string; points: readonly (readonly [number, number])[]; within: (model: string, celsius: number) => number; because: string; fromMemory: boolean; find(celsius: number, model: string): number }

const SERIES: readonly Series[] = [
  {
    what: "0.025 mol/kg NaHCO3 + 0.025 mol/kg Na2CO3, without pairs", fromMemory: false, because: `${ONE_GAMMA}; the tabulated NaCO3^- pair is left out, as the standard's convention does`,
    points: [[0, 10.317], [5, 10.245], [10, 10.179], [15, 10.118], [20, 10.062], [25, 10.012], [30, 9.966]],
    within: (model) => (model === "guntelberg" ? 0.06 : 0.02),
    find: (temperature, activity) => pHOf({ temperature, Na: "75 mmol/L", DIC: "50 mmol/L" }, { activity, complexes: "none" }),
  },
  {
    what: "0.025 mol/kg KH2PO4 + 0.025 mol/kg Na2HPO4", fromMemory: false, because: `${ONE_GAMMA}; the phosphate constants are van 't Hoff lines`,
    points: [[0, 6.984], [5, 6.951], [10, 6.923], [15, 6.9], [20, 6.881], [25, 6.865], [30, 6.853], [40, 6.838]],
    within: (model, t) => (model === "guntelberg" ? 0.07 : t > 30 ? 0.06 : 0.05),
    find: (temperature, activity) => pHOf({ temperature, K: "25 mmol/L", Na: "50 mmol/L", PO4: "50 mmol/L" }, { activity }),
  },
  {
    what: "0.008695 mol/kg KH2PO4 + 0.03043 mol/kg Na2HPO4", fromMemory: true, because: `${ONE_GAMMA}; the phosphate constants are van 't Hoff lines`,
    points: [[0, 7.534], [10, 7.472], [20, 7.429], [25, 7.413], [30, 7.4], [40, 7.38]],
    within: (model, t) => (model === "guntelberg" ? 0.08 : t > 30 ? 0.06 : 0.05),
    find: (temperature, activity) => pHOf({ temperature, K: "8.695 mmol/L", Na: "60.86 mmol/L", PO4: "39.125 mmol/L" }, { activity }),
  },
  {
    what: "0.01 mol/kg Na2B4O7, boric acid by extend", fromMemory: true, because: `${ONE_GAMMA}; Owen's constants are good to 0.005`,
    points: [[5, 9.395], [10, 9.332], [15, 9.276], [20, 9.225], [25, 9.18], [30, 9.139], [40, 9.068]],
    within: (model) => (model === "guntelberg" ? 0.03 : 0.02),
    find: (temperature, activity) => pHWith(BORATE, { temperature, Na: "20 mmol/L", B: "40 mmol/L" }, activity),
  },
  {
    what: "0.05 mol/kg potassium hydrogen phthalate, phthalic acid by extend", fromMemory: true, because: `${ONE_GAMMA}; ion sizes of the phthalates are taken as 4 Å`,
    points: [[25, 4.005]], within: (model) => (model === "guntelberg" ? 0.05 : 0.04),
    find: (temperature, activity) => pHWith(PHTHALATE, { temperature, K: "50 mmol/L", Ph: "50 mmol/L" }, activity),
  },
  {
    what: "0.0203 mol/kg Ca(OH)2 (saturated at 25 °C)", fromMemory: true, because: `${ONE_GAMMA}; the published constants of CaOH^+ differ by 0.4`,
    points: [[25, 12.454]], within: () => 0.06,
    find: (temperature, activity) => pHOf({ temperature, Ca: "20.3 mmol/L" }, { activity }),
  },
];

/** Mean activity coefficient of a salt of M (charge z) and chloride, from activities and concentrations. */
function meanCoefficient(metal: string, z: number, molality: number, activity: string): number {
  const ion = z === 1 ? `${metal}^+` : `${metal}^${z}+`;
  const key = metal === "H" ? {} : { [metal]: `${molality} mol/L` };
  const found = solveOneWater({ temperature: 25, DIC: "0 mmol/L", Cl: `${z * molality} mol/L`, ...key }, { ...noCarbon, activity }, ["species", "activities"]);
  const lg = (name: string) => found[`lgActivity:${name}`] - Math.log10(found[`conc:${name}`]);
  return 10 ** ((lg(ion) + z * lg("Cl^-")) / (1 + z));
}

const COEFFICIENTS: readonly (readonly [string, string, number, number, number])[] = [
  ["HCl", "H", 1, 0.01, 0.904], ["HCl", "H", 1, 0.1, 0.796], ["NaCl", "Na", 1, 0.01, 0.902], ["NaCl", "Na", 1, 0.1, 0.778], ["KCl", "K", 1, 0.1, 0.77],
  ["CaCl2", "Ca", 2, 0.01, 0.729], ["CaCl2", "Ca", 2, 0.1, 0.518],
];

export function buffers(): PublishedCheck[] {
  const standards = SERIES.flatMap((each) => MODELS.flatMap((model) => each.points.map(([celsius, pH]): PublishedCheck => ({
    topic: "pH standards", what: `pH of ${each.what}, ${celsius} °C, ${model}`, unit: "pH", source: NIST, fromMemory: each.fromMemory, value: pH,
    tolerance: { absolute: each.within(model, celsius) }, because: each.because, find: () => each.find(celsius, model),
  }))));
  const coefficients = COEFFICIENTS.flatMap(([salt, metal, z, molality, value]) => (["davies", "debye-huckel", "truesdell-jones"] as const).map((model): PublishedCheck => ({
    topic: "activity coefficients", what: `γ± of ${molality} mol/kg ${salt}, 25 °C, ${model}`, unit: "", source: ROBINSON, fromMemory: true, value,
    tolerance: { share: z === 2 && molality === 0.1 ? 0.06 : z === 2 ? 0.03 : molality === 0.1 ? 0.03 : 0.01 },
    because: "the models are fits to many salts at once: about 1 % at 0.01 mol/kg, 3 % at 0.1, twice that for a divalent ion; I = 0.3 for 0.1 mol/kg CaCl2 is beyond the extended Debye–Hückel model's range",
    find: () => meanCoefficient(metal, z, molality, model),
  })));
  const ammonia = ([["0.1 mol/L", 11.1], ["0.01 mol/L", 10.6]] as const).map(([molarity, value]): PublishedCheck => ({
    topic: "solutions of known pH", what: `pH of ${molarity} NH3, 25 °C, davies`, unit: "pH", source: "CRC Handbook of Chemistry and Physics, approximate pH values of bases", fromMemory: true, value,
    tolerance: { absolute: 0.06 }, because: "tabulated to one decimal",
    // Ammonia is ammonium less its proton: an ANC of its own size.
    find: () => solveOneWater({ temperature: 25, DIC: "0 mmol/L", NH4: molarity, ANC: molarity.replace("mol", "eq") }, { close: ["ANC", "DIC"], activity: "davies" }, ["pH"]).pH,
  }));
  return [...standards, ...coefficients, ...ammonia];
}
