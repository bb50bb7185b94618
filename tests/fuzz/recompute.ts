/**
 * The certificate of a row computed again from its columns (`conc:`, `lgActivity:`, `solid:`, `gas:`) and the printed constants, in plain
 * arithmetic over elements and charges: no tableau, no components, none of the solver's code.
 */
import { SOLIDS, SPECIES } from "@/lib/chemistry/data";
import { debyeSizeFactor, debyeSlope, logKAt, pressureOfFraction } from "@/lib/chemistry/temperature";
import type { Pressure, ResolvedCase, ResolvedWater } from "@/lib/chemistry/types";

export type Values = Record<string, number>;

/** Reference charge of what each element brings at the CO2 end point. */
const REFERENCE: Record<string, number> = { C: 0, Na: 1, K: 1, Ca: 2, Mg: 2, Sr: 2, Ba: 2, Cl: -1, S: -2, F: -1, P: -1, Si: 0 };
const BY_ELEMENT: Record<string, string> = { Na: "Na", K: "K", Ca: "Ca", Mg: "Mg", Sr: "Sr", Ba: "Ba", Al: "Al", Cl: "Cl", SO4: "S", F: "F", PO4: "P", Si: "Si" };
const NITROGEN: Record<string, string> = { "NH4^+": "NH4", NH3: "NH4", "NO3^-": "NO3", "NO2^-": "NO2" };
const STRONG: Record<string, number> = { Na: 1, K: 1, NH4: 1, Ca: 2, Mg: 2, Sr: 2, Ba: 2, Cl: -1, NO3: -1, NO2: -1, SO4: -2, F: -1 };
export const TOTAL_KEYS = [...Object.keys(BY_ELEMENT), "NH4", "NO3", "NO2"];

const AQUEOUS = SPECIES.filter((s) => s.name !== "CO2(g)");

/** Σ and Σ|…| of a weight over the concentrations. */
interface Sum { value: number; size: number }

export function atmOf(pressure: Pressure | null, celsius: number, water: ResolvedWater): number {
  if (!pressure) return NaN;
  return "atm" in pressure ? pressure.atm : pressureOfFraction(pressure.dryFraction, celsius, water.altitude, water.pressureAtm);
}

export class Recomputed {
  worst = 0;
  what = "";
  private organic: [string, number][];

  constructor(readonly values: Values, readonly kase: ResolvedCase, readonly celsius: number, readonly overrides: Record<string, number>) {
    this.organic = Object.keys(values).filter((name) => /^conc:H?\d*Org/.test(name)).map((name) => [name.slice(5), anionCharge(name.slice(5))]);
  }

  note(error: number, what: string): void {
    if (!(error <= this.worst)) { this.worst = Number.isNaN(error) ? Infinity : error; this.what = what; }
  }

  conc(name: string): number { return this.values[`conc:${name}`] ?? 0; }

  sum(weight: (s: (typeof SPECIES)[number]) => number, organicWeight: (charge: number) => number = () => 0): Sum {
    let value = 0;
    let size = 0;
    for (const s of AQUEOUS) { const part = weight(s) * this.conc(s.name); value += part; size += Math.abs(part); }
    for (const [name, z] of this.organic) { const part = organicWeight(z) * this.conc(name); value += part; size += Math.abs(part); }
    return { value, size };
  }

  total(key: string): Sum {
    const element = BY_ELEMENT[key];
    return this.sum((s) => (element ? s.composition[element] ?? 0 : NITROGEN[s.name] === key ? 1 : 0));
  }

  charge(): Sum { return this.sum((s) => s.charge, (z) => z); }
  carbon(): Sum { return this.sum((s) => s.composition.C ?? 0); }
  organicTotal(): Sum { return this.sum(() => 0, () => 1); }
  alkalinity(): Sum { return this.sum((s) => (s.composition.Al ? 0 : referenceCharge(s) - s.charge)); }

  equal(sum: Sum, wanted: number, what: string, extra = 0): void {
    this.note(Math.abs(sum.value - wanted) / Math.max(sum.size + Math.abs(wanted) + extra, 1e-300), what);
  }

  logK(name: string, printed: Parameters<typeof logKAt>[0]): number { return this.overrides[name] ?? logKAt(printed, this.celsius); }

  /** log a_w by the rule of the activity model. */
  water(): number {
    if (this.kase.activity === "ideal") return 0;
    return Math.log10(1 - 0.017 * this.sum(() => 1, () => 1).value);
  }

  /** Activities against concentrations, and every printed reaction among them. */
  massAction(): void {
    const strength = 0.5 * this.sum((s) => s.charge ** 2, (z) => z * z).value;
    const A = debyeSlope(this.celsius);
    const B = debyeSizeFactor(this.celsius);
    const lgWater = this.water();
    for (const s of AQUEOUS) {
      const activity = this.values[`lgActivity:${s.name}`];
      const c = this.conc(s.name);
      if (activity === undefined || Number.isNaN(activity)) { this.note(c, `${s.name} has no activity but a concentration`); continue; }
      const expected = activity - lgGamma(s, this.kase.activity, strength, A, B);
      if (expected > -299) this.note(Math.abs(Math.log10(c) - expected), `activity of ${s.name}`);
      if (!s.reaction || !s.logK) continue;
      let q = 0;
      for (const [name, count] of Object.entries(s.reaction)) q += count * (name === "H2O" ? lgWater : this.values[`lgActivity:${name}`]);
      this.note(Math.abs(q - this.logK(s.name, s.logK)), `reaction of ${s.name}`);
    }
    this.organicMassAction(strength, A, B);
  }

  private organicMassAction(strength: number, A: number, B: number): void {
    const { model, pKa } = this.kase.organic;
    const hydrogen = SPECIES.find((s) => s.name === "H^+")!;
    // [H+] = 10^−pH/γ
    const lgH = this.values["lgActivity:H^+"] - lgGamma(hydrogen, this.kase.activity, strength, A, B);
    const pH = -this.values["lgActivity:H^+"];
    const steps = [...this.organic].sort((a, b) => b[1] - a[1]);
    for (let k = 1; k < steps.length; k++) {
      const upper = this.conc(steps[k - 1][0]);
      const lower = this.conc(steps[k][0]);
      if (!(upper > 1e-290) || !(lower > 1e-290)) continue;
      const pK = model === "oliver-1983" ? 0.96 + 0.9 * pH - 0.039 * pH * pH : pKa[k - 1];
      this.note(Math.abs(Math.log10(lower) + lgH - Math.log10(upper) + pK), `organic step ${k}`);
    }
  }

  saturation(name: string): number {
    const solid = SOLIDS.find((each) => each.name === name)!;
    let q = -this.logK(name, solid.logK);
    const lgWater = this.water();
    for (const [species, count] of Object.entries(solid.reaction)) q += count * (species === "H2O" ? lgWater : this.values[`lgActivity:${species}`] ?? NaN);
    return q;
  }

  pCO2(): number {
    const gas = SPECIES.find((s) => s.name === "CO2(g)")!;
    return 10 ** (this.values["lgActivity:CO2(aq)"] - this.logK("CO2(g)", gas.logK!));
  }
}

function anionCharge(name: string): number {
  const match = /\^(\d*)-$/.exec(name);
  return match ? -Number(match[1] || 1) : 0;
}

function referenceCharge(s: (typeof SPECIES)[number]): number {
  let charge = 0;
  for (const [element, count] of Object.entries(s.composition)) if (REFERENCE[element] !== undefined) charge += count * REFERENCE[element];
  if (NITROGEN[s.name]) charge += NITROGEN[s.name] === "NH4" ? 1 : -1;
  return charge;
}

function lgGamma(s: (typeof SPECIES)[number], model: ResolvedCase["activity"], strength: number, A: number, B: number): number {
  if (model === "ideal") return 0;
  if (s.charge === 0) return 0.1 * strength;
  const root = Math.sqrt(strength);
  const z2 = s.charge * s.charge;
  if (model === "davies") return -A * z2 * (root / (1 + root) - 0.3 * strength);
  if (model === "guntelberg") return -A * z2 * root / (1 + root);
  const fitted = model === "truesdell-jones" ? s.truesdellJones : null;
  const size = fitted ? fitted.a : s.ionSize!;
  return -A * z2 * root / (1 + B * size * root) + (fitted ? fitted.b * strength : 0);
}

/** Facts of the settled water. */
export function checkFacts(state: Recomputed, water: ResolvedWater): void {
  const { kase } = state;
  let strong = 0;
  for (const [key, z] of Object.entries(STRONG)) strong += z * (water.totals[key] ?? 0);
  for (const key of TOTAL_KEYS) state.equal(state.total(key), water.totals[key] ?? 0, `total ${key}`);
  const organic = kase.organic;
  if (organic.model !== "none") state.equal(state.organicTotal(), (water.DOC ?? 0) * organic.sitesPerMgC / Math.max(organic.pKa.length, 1), "total organic acid");
  for (const fact of kase.close.facts) {
    const ions = Object.entries(STRONG).reduce((size, [key, z]) => size + Math.abs(z * (water.totals[key] ?? 0)), 0);
    if (fact === "charge") state.equal(state.charge(), 0, "electroneutrality");
    else if (fact === "ANC") state.equal(state.charge(), strong - water.ANC!, "ANC", ions + Math.abs(water.ANC!));
    else if (fact === "alkalinity") state.equal(state.alkalinity(), water.alkalinity!, "alkalinity");
    else if (fact === "pH") state.note(Math.abs(-state.values["lgActivity:H^+"] - water.pH!), "pH");
    else if (fact === "DIC") state.equal(state.carbon(), water.DIC!, "DIC");
    else if (fact === "pCO2") state.note(Math.abs(Math.log10(state.pCO2() / atmOf(water.pCO2, state.celsius, water))), "pCO2");
    else state.note(Math.abs(state.saturation(kase.close.saturated!.solid) - kase.close.saturated!.SI), "saturation");
  }
}

/** What a second state keeps of a first: every total apart from what gas and solids brought or took, and the charge. */
export function checkKept(first: Recomputed, second: Recomputed, gasAtm: number): void {
  const solids = second.kase.react?.solids ?? [];
  const brought = (name: string) => second.values[`solid:${name}`] / 1e3 || 0;
  const scales = new Map<string, number>();
  const check = (key: string, weight: (s: (typeof SOLIDS)[number]) => number, before: Sum, after: Sum, gas: number) => {
    let change = gas;
    let size = Math.abs(gas);
    for (const { name, supply } of solids) {
      const count = weight(SOLIDS.find((s) => s.name === name)!);
      change += count * brought(name);
      size += Math.abs(count) * (Math.abs(brought(name)) + (typeof supply === "number" ? supply : 0));
    }
    scales.set(key, after.size + before.size + size);
    second.equal(after, before.value + change, `kept ${key}`, before.size + size);
  };
  for (const key of TOTAL_KEYS) check(key, (s) => (BY_ELEMENT[key] ? s.composition[BY_ELEMENT[key]] ?? 0 : 0), first.total(key), second.total(key), 0);
  const gas = (second.values["gas:CO2"] ?? 0) / 1e3;
  check("carbon", (s) => s.composition.C ?? 0, first.carbon(), second.carbon(), gas);
  check("charge", () => 0, first.charge(), second.charge(), 0);
  check("organic", () => 0, first.organicTotal(), second.organicTotal(), 0);
  if (Number.isNaN(gasAtm)) { if (gas !== 0) second.note(1, "gas of a closed water"); } else second.note(Math.abs(Math.log10(second.pCO2() / gasAtm)), "pCO2 of the gas");
  for (const { name, supply, saturation } of solids) {
    const over = second.saturation(name) - saturation;
    const dissolved = brought(name);
    if (Number.isNaN(over)) { if (supply === "excess") second.note(1, `${name} in excess without its components`); else second.note(Math.abs(dissolved), `${name} without its components`); continue; }
    if (supply === "excess") { second.note(Math.abs(over), `${name} in excess off its saturation`); continue; }
    // A solid is nothing beside the largest of the balances that it takes part in.
    let scale = scales.get("charge")!;
    for (const key of [...TOTAL_KEYS, "carbon"]) {
      const element = key === "carbon" ? "C" : BY_ELEMENT[key];
      if (element && SOLIDS.find((s) => s.name === name)!.composition[element]) scale = Math.max(scale, scales.get(key)!);
    }
    const left = ((typeof supply === "number" ? supply : 0) - dissolved) / scale;
    second.note(Math.max(over, -left, Math.min(left, -over), 0), `${name}: amount and saturation`);
  }
}
