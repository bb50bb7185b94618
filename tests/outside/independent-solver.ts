/**
 * A second way to the answers, for tests only. Shares no code and no formulation with lib/kernel:
 *  - balances are written in bare ions (CO3^2-, PO4^3- …) and the proton condition is the plain sum of charges;
 *  - no minimisation, no Newton system to start with: four nested one-dimensional searches (pH, CO3, SO4, F) on logarithms of ratios,
 *    every other ion in closed form, inside a fixed-point iteration over ionic strength and water activity;
 *  - which solids are there is found by trying every subset, not by an active set;
 *  - the state found in double precision is then polished in decimal arithmetic (decimal.js, 34 digits): residuals in decimals,
 *    corrections from a numerical Jacobian, until the last correction is below 1e-20.
 * Constants: independent-constants.ts.
 */
import { CO2_GAS, debyeHuckel, type Master, PLAIN_SOLIDS, PLAIN_SPECIES, type PlainSolid, type PlainSpecies } from "./independent-constants";
import { polish } from "./independent-polish";

export type PlainModel = "ideal" | "guntelberg" | "davies" | "debye-huckel" | "truesdell-jones";
export type PlainOrganic = { kind: "none" } | { kind: "oliver"; acid: number } | { kind: "steps"; acid: number; pK: number[] };
export type PlainFact =
  | { is: "charge" | "alkalinity" | "pH" | "pCO2" | "DIC"; value: number }
  | { is: "saturated"; solid: string; value: number };

export interface PlainProblem {
  celsius: number;
  model: PlainModel;
  /** Names of pairs left out. */
  omit: ReadonlySet<string>;
  /** log K of solids that replace the table's. */
  logK: Readonly<Record<string, number>>;
  organic: PlainOrganic;
  totals: Readonly<Partial<Record<Master, number>>>;
  facts: readonly [PlainFact, PlainFact];
  /** Carbon balance that the solids at equilibrium add to, where the carbon is closed. */
  held: readonly { solid: string; SI: number }[];
}

export interface PlainState {
  problem: PlainProblem;
  /** mol/kg by name; organic species as in the result's columns. */
  conc: Record<string, number>;
  pH: number; pCO2: number; DIC: number; ionicStrength: number; charge: number; alkalinity: number;
  totals: Partial<Record<Master, number>>;
  /** Dissolved (+) by held solid, mol/kg. */
  dissolved: Record<string, number>;
  SI: Record<string, number | null>;
  /** Largest relative correction of the last polishing step. */
  lastStep: number;
}

export const LN10 = Math.LN10;
const GONE = -3000;
/** Where saturation admits a state beyond a(CO2) = 1e3 too, it is passed over: that is no water. */
const LN_MOST_CARBON = Math.log(1e3);
const LIGANDS: readonly Master[] = ["H", "CO3", "SO4", "F"];
const OTHERS: readonly Master[] = ["Ca", "Mg", "Na", "K", "NH4", "Sr", "Ba", "Al", "Cl", "NO3", "NO2", "PO4", "Si"];
/** A sum kept as what counts for it and what counts against it, both ≥ 0, so that its sign can be read from a ratio. */
type Split = [number, number];
const minus = (a: Split, b: Split): Split => [a[0] + b[1], a[1] + b[0]];
const times = (a: Split, k: number): Split => (k >= 0 ? [a[0] * k, a[1] * k] : [-a[1] * k, -a[0] * k]);
const lnRatio = (a: Split): number => Math.log(a[0]) - Math.log(a[1]);

export const solidOf = (name: string): PlainSolid => {
  const found = PLAIN_SOLIDS.find((solid) => solid.name === name);
  if (!found) throw new Error(`no solid ${name}`);
  return found;
};
export const solidLogK = (problem: PlainProblem, name: string): number => problem.logK[name] ?? solidOf(name).logK(problem.celsius);
export const speciesOf = (problem: PlainProblem): PlainSpecies[] => PLAIN_SPECIES.filter((each) => !problem.omit.has(each.name));

/** log10 γ of a charge number and ion size. */
export function logGamma(problem: PlainProblem, z: number, size: number | null, tj: [number, number] | null, strength: number): number {
  if (problem.model === "ideal") return 0;
  if (z === 0) return 0.1 * strength;
  const { A, B } = debyeHuckel(problem.celsius);
  const root = Math.sqrt(strength);
  if (problem.model === "guntelberg") return -A * z * z * root / (1 + root);
  if (problem.model === "davies") return -A * z * z * (root / (1 + root) - 0.3 * strength);
  if (problem.model === "truesdell-jones" && tj) return -A * z * z * root / (1 + B * tj[0] * root) + tj[1] * strength;
  return -A * z * z * root / (1 + B * (size ?? 0) * root);
}

/** Concentrations of organic species by number of protons lost, from pH and γ(H+). */
export function organicAmounts(organic: PlainOrganic, pH: number, logGammaH: number): number[] {
  if (organic.kind === "none" || organic.acid === 0) return [];
  const h = 10 ** (-pH - logGammaH);
  const steps = organic.kind === "oliver" ? [0.96 + 0.9 * pH - 0.039 * pH * pH] : organic.pK;
  const weights = [1];
  for (const pK of steps) weights.push(weights[weights.length - 1] * 10 ** -pK / h);
  const all = weights.reduce((total, each) => total + each, 0);
  return weights.map((weight) => organic.acid * weight / all);
}

export function organicLabel(count: number, lost: number): string {
  const left = count - lost;
  const acid = left === 0 ? "Org" : left === 1 ? "HOrg" : `H${left}Org`;
  return lost === 0 ? acid : lost === 1 ? `${acid}^-` : `${acid}^${lost}-`;
}

interface Sample { at: number; value: number }

/**
 * Two neighbouring samples of unlike sign, looked for on both sides with growing steps. Where the inner searches have no answer any more
 * the step on that side shrinks instead, until it is too small to matter.
 */
function growBracket(f: (x: number) => number, start: Sample, low: number, high: number): [Sample, Sample] | null {
  const sides = [{ from: start, step: -0.05, end: low }, { from: start, step: 0.05, end: high }];
  for (let isOpen = true; isOpen;) {
    isOpen = false;
    for (const side of sides) {
      if (side.from.at === side.end || Math.abs(side.step) < 1e-3) continue;
      isOpen = true;
      const at = side.step < 0 ? Math.max(low, side.from.at + side.step) : Math.min(high, side.from.at + side.step);
      const next = { at, value: f(at) };
      if (Number.isNaN(next.value)) { side.step /= 4; continue; }
      if (next.value * side.from.value <= 0) return [side.from, next];
      side.from = next;
      side.step *= 3;
    }
  }
  return null;
}

/** Root of a monotone function near `start`, by bracket growth and Chandrupatla's method; null without a sign change in [low, high]. */
function findRoot(f: (x: number) => number, start: number, low: number, high: number): number | null {
  const first = Math.min(Math.max(start, low), high);
  const f0 = f(first);
  if (f0 === 0) return first;
  const bracket = growBracket(f, { at: first, value: f0 }, low, high);
  if (!bracket) return null;
  let [{ at: a, value: fa }, { at: b, value: fb }] = bracket;
  let c = a;
  let fc = fa;
  let t = 0.5;
  for (let k = 0; k < 120; k++) {
    const x = a + t * (b - a);
    const fx = f(x);
    if (Number.isNaN(fx)) return null;
    if (Math.sign(fx) === Math.sign(fa)) { c = a; fc = fa; } else { c = b; fc = fb; b = a; fb = fa; }
    a = x; fa = fx;
    const best = Math.abs(fa) < Math.abs(fb) ? a : b;
    const width = Math.abs(b - a);
    if (fa === 0 || width < 2e-13 * (1 + Math.abs(best)) || Math.abs(Math.abs(fa) < Math.abs(fb) ? fa : fb) < 1e-14) return best;
    const xi = (a - b) / (c - b);
    const phi = (fa - fb) / (fc - fb);
    t = phi ** 2 < xi && (1 - phi) ** 2 < 1 - xi
      ? fa / (fb - fa) * (fc / (fb - fc)) + (c - a) / (b - a) * (fa / (fc - fa)) * (fb / (fc - fb)) : 0.5;
    const least = 1e-13 * (1 + Math.abs(best)) / width;
    t = Math.min(Math.max(t, least), 1 - least);
  }
  return Math.abs(fa) < Math.abs(fb) ? a : b;
}

/** One water at fixed ionic strength and water activity: the four nested searches. */
class Nest {
  readonly ln: Record<Master, number>;
  readonly conc: Float64Array;
  readonly out: Record<Master, number>;
  organics: number[] = [];
  private readonly species: PlainSpecies[];
  private readonly lnK: Float64Array;
  private readonly primary: (Master | null)[];
  private readonly ties: { solid: PlainSolid; target: number; master: Master }[] = [];
  private lnWater = 0;
  private logGammaH = 0;
  private readonly formula: Map<Master, { index: number; n: number }[]>;

  constructor(readonly problem: PlainProblem) {
    this.species = speciesOf(problem);
    this.lnK = new Float64Array(this.species.length);
    this.conc = new Float64Array(this.species.length);
    this.primary = this.species.map((each) => OTHERS.find((m) => each.parts[m]) ?? null);
    const all = [...LIGANDS, ...OTHERS];
    this.ln = Object.fromEntries(all.map((m) => [m, GONE])) as Record<Master, number>;
    this.out = Object.fromEntries(all.map((m) => [m, 0])) as Record<Master, number>;
    this.formula = new Map(all.map((m) => [m, this.species.flatMap((each, index) => (each.parts[m] ? [{ index, n: each.parts[m] }] : []))]));
    this.ln.H = -7 * LN10;
    this.ln.CO3 = Math.log(1e-6);
    for (const m of ["SO4", "F"] as const) if ((problem.totals[m] ?? 0) > 0) this.ln[m] = Math.log((problem.totals[m] ?? 0) / 2);
    this.chooseTies();
  }

  /** Each held solid settles one ion; carbonates first, so that what follows can lean on them. */
  private chooseTies(): void {
    const order = ["calcite", "aragonite", "vaterite", "strontianite", "gypsum", "anhydrite", "fluorite"];
    const rank = (name: string) => (order.includes(name) ? order.indexOf(name) : order.length);
    const taken = new Set<Master>();
    for (const { solid: name, SI } of [...this.problem.held].sort((a, b) => rank(a.solid) - rank(b.solid))) {
      const solid = solidOf(name);
      const candidates: Master[] = [...OTHERS.filter((m) => solid.parts[m]), ...(["SO4", "F"] as const).filter((m) => solid.parts[m])];
      const master = candidates.find((m) => !taken.has(m));
      if (!master) throw new Error(`nothing left for ${name} to settle`);
      taken.add(master);
      this.ties.push({ solid, target: (solidLogK(this.problem, name) + SI) * LN10, master });
      if ((master === "SO4" || solid.parts.SO4) && this.ln.SO4 === GONE) this.ln.SO4 = Math.log(1e-4);
      if ((master === "F" || solid.parts.F) && this.ln.F === GONE) this.ln.F = Math.log(1e-5);
    }
  }

  setActivity(strength: number, waterActivity: number): void {
    const { problem } = this;
    this.lnWater = Math.log(waterActivity);
    this.logGammaH = logGamma(problem, 1, 9, null, strength);
    this.species.forEach((each, i) => {
      this.lnK[i] = (each.logK(problem.celsius) - logGamma(problem, each.z, each.size, each.tj, strength)) * LN10 + each.water * this.lnWater;
    });
  }

  private isTied(m: Master): boolean { return this.ties.some((tie) => tie.master === m); }
  private isLoose(m: "SO4" | "F"): boolean { return this.ln[m] !== GONE && !this.isTied(m); }
  private total(m: Master): Split { return [this.problem.totals[m] ?? 0, 0]; }

  /** All concentrations from the four ligands' activities; tied ions from their solids. */
  private spread(): void {
    const { ln, species, lnK, conc, primary } = this;
    for (const tie of this.ties) {
      let rest = tie.target - tie.solid.water * this.lnWater;
      for (const [m, n] of Object.entries(tie.solid.parts) as [Master, number][]) if (m !== tie.master) rest -= n * ln[m];
      ln[tie.master] = rest / (tie.solid.parts[tie.master] ?? 1);
    }
    for (let i = 0; i < species.length; i++) {
      const { parts } = species[i];
      conc[i] = Math.exp(lnK[i] + (parts.H ?? 0) * ln.H + (parts.CO3 ?? 0) * ln.CO3 + (parts.SO4 ?? 0) * ln.SO4 + (parts.F ?? 0) * ln.F);
    }
    for (const m of OTHERS) {
      const list = this.formula.get(m) ?? [];
      let free: number;
      if (this.isTied(m)) free = Math.exp(ln[m]);
      else {
        let weight = 0;
        for (const { index } of list) weight += conc[index];
        free = (this.problem.totals[m] ?? 0) / weight;
        ln[m] = free > 0 ? Math.log(free) : GONE;
      }
      for (const { index } of list) conc[index] *= free;
    }
    for (const [m, list] of this.formula) {
      let sum = 0;
      for (const { index, n } of list) if (n > 0) sum += n * conc[index];
      this.out[m] = sum;
    }
    void primary;
    this.organics = organicAmounts(this.problem.organic, -ln.H / LN10, this.logGammaH);
  }

  /** Amount of each held solid dissolved, last tie first: an ion tied earlier may stand in later solids, never the other way round. */
  private amounts(): Map<PlainSolid, Split> {
    const known = new Map<PlainSolid, Split>();
    for (let k = this.ties.length - 1; k >= 0; k--) {
      const { solid, master } = this.ties[k];
      let x = minus([this.out[master], 0], this.total(master));
      for (const [other, amount] of known) if (other.parts[master]) x = minus(x, times(amount, other.parts[master] ?? 0));
      known.set(solid, times(x, 1 / (solid.parts[master] ?? 1)));
    }
    return known;
  }

  private balance(m: Master, total: Split): number {
    let x = minus([this.out[m], 0], total);
    for (const [solid, amount] of this.amounts()) if (solid.parts[m]) x = minus(x, times(amount, solid.parts[m] ?? 0));
    return lnRatio(x);
  }

  private settleFluoride(): void {
    if (!this.isLoose("F")) return this.spread();
    const f = (x: number) => { this.ln.F = x; this.spread(); return this.balance("F", this.total("F")); };
    const root = findRoot(f, this.ln.F, -250, 10);
    if (root === null) throw new NoState("fluoride");
    f(root);
  }

  private settleLigands(): void {
    if (!this.isLoose("SO4")) return this.settleFluoride();
    const f = (x: number) => { this.ln.SO4 = x; this.settleFluoride(); return this.balance("SO4", this.total("SO4")); };
    const root = findRoot(f, this.ln.SO4, -250, 10);
    if (root === null) throw new NoState("sulphate");
    f(root);
  }

  private weigh(weight: (each: PlainSpecies) => number, organic: (lost: number) => number, value: number): number {
    let positive = Math.max(0, -value);
    let negative = Math.max(0, value);
    for (let i = 0; i < this.species.length; i++) {
      const w = weight(this.species[i]) * this.conc[i];
      if (w > 0) positive += w; else negative -= w;
    }
    this.organics.forEach((amount, lost) => { const w = organic(lost) * amount; if (w > 0) positive += w; else negative -= w; });
    return Math.log(positive) - Math.log(negative);
  }

  /** How far the present state is from a fact, as the log of a ratio. */
  private miss(fact: PlainFact): number {
    switch (fact.is) {
      case "charge": return this.weigh((each) => each.z, (lost) => -lost, fact.value);
      case "alkalinity": return this.weigh((each) => each.alkalinity, () => 0, fact.value);
      case "DIC": return this.balance("CO3", [fact.value, 0]);
      case "pH": return -this.ln.H - fact.value * LN10;
      case "pCO2": return this.lnPressure() - Math.log(fact.value);
      case "saturated": {
        const solid = solidOf(fact.solid);
        let product = solid.water * this.lnWater - (solidLogK(this.problem, fact.solid) + fact.value) * LN10;
        for (const [m, n] of Object.entries(solid.parts) as [Master, number][]) product += n * this.ln[m];
        return product;
      }
    }
  }

  private lnPressure(): number { return this.ln.CO3 + this.lnCarbonStep(); }

  /** ln(p/a(CO3)) at the present pH. */
  private lnCarbonStep(): number {
    const co2 = PLAIN_SPECIES.find((each) => each.name === "CO2(aq)");
    return (co2?.logK(this.problem.celsius) ?? 0) * LN10 + 2 * this.ln.H - this.lnWater - CO2_GAS(this.problem.celsius) * LN10;
  }

  private settleCarbon(fact: PlainFact): void {
    if (fact.is === "pCO2") { this.ln.CO3 = Math.log(fact.value) - this.lnCarbonStep(); return this.settleLigands(); }
    const f = (x: number) => { this.ln.CO3 = x; this.settleLigands(); return this.miss(fact); };
    const root = findRoot(f, this.ln.CO3, -150, 25);
    if (root === null) throw new NoState(fact.is);
    f(root);
  }

  /** Both facts. pH first where it is given; else a search over pH with the carbon settled inside. Throws NoState. */
  settle(isFirst: boolean): void {
    const { facts } = this.problem;
    const pH = facts.find((fact) => fact.is === "pH");
    if (pH) {
      this.ln.H = -pH.value * LN10;
      this.settleCarbon(facts[0] === pH ? facts[1] : facts[0]);
      return;
    }
    const carbon = facts.find((fact) => fact.is === "pCO2") ?? facts.find((fact) => fact.is === "DIC" || fact.is === "saturated") ?? facts[1];
    const other = facts[0] === carbon ? facts[1] : facts[0];
    const f = (x: number) => {
      const kept = { ...this.ln };
      this.ln.H = x;
      try {
        this.settleCarbon(carbon);
      } catch (error) {
        if (!(error instanceof NoState)) throw error;
        Object.assign(this.ln, kept); // where the failed search ended is no place to start the next one from
        return NaN;
      }
      return carbon.is === "saturated" && this.lnPressure() + CO2_GAS(this.problem.celsius) * LN10 > LN_MOST_CARBON ? NaN : this.miss(other);
    };
    if (carbon.is === "saturated" && isFirst) this.ln.H = this.lowestBracket(f);
    const root = findRoot(f, this.ln.H, -16 * LN10, 2 * LN10);
    if (root === null) throw new NoState(other.is);
    f(root);
  }

  /** Several states may be at one saturation: the search starts beside the one of lowest pH. */
  private lowestBracket(f: (x: number) => number): number {
    let before = NaN;
    for (let pH = -1.9; pH < 16; pH += 0.1) {
      const value = f(-pH * LN10);
      if (before * value <= 0) return findRoot(f, -(pH - 0.05) * LN10, -pH * LN10, -(pH - 0.1) * LN10) ?? -pH * LN10;
      before = value;
    }
    throw new NoState("no pH");
  }

  strength(): { strength: number; solutes: number } {
    let strength = 0;
    let solutes = 0;
    for (let i = 0; i < this.species.length; i++) { strength += this.conc[i] * this.species[i].z ** 2 / 2; solutes += this.conc[i]; }
    this.organics.forEach((amount, lost) => { strength += amount * lost * lost / 2; solutes += amount; });
    return { strength, solutes };
  }

  amountOf(name: string): number {
    for (const [solid, [more, less]] of this.amounts()) if (solid.name === name) return more - less;
    return 0;
  }
}

/** The facts admit no state. */
export class NoState extends Error {}

const waterActivity = (problem: PlainProblem, solutes: number) => (problem.model === "ideal" ? 1 : 1 - 0.017 * solutes);

/** Solves one state. Throws NoState where there is none. */
export function solveState(problem: PlainProblem): PlainState {
  const nest = new Nest(problem);
  let strength = Object.entries(problem.totals).reduce((sum, [, total]) => sum + (total ?? 0), 1e-5) * 0.8;
  let solutes = strength;
  let before: { from: number; to: number } | null = null;
  for (let k = 0; k < 200; k++) {
    nest.setActivity(strength, waterActivity(problem, solutes));
    nest.settle(k === 0);
    const next = nest.strength();
    const change = Math.abs(next.strength - strength) / next.strength + Math.abs(next.solutes - solutes);
    solutes = next.solutes;
    if (problem.model === "ideal" || change < 1e-9) return polish(problem, nest.ln, nest.strength(), (name) => nest.amountOf(name));
    // Secant on I(c) − I once two points are known, kept within a factor of three.
    let to = next.strength;
    if (before) {
      const slope = (next.strength - before.to) / (strength - before.from);
      if (Number.isFinite(slope) && slope < 0.95) to = strength + (next.strength - strength) / (1 - slope);
    }
    before = { from: strength, to: next.strength };
    strength = Math.min(Math.max(to, strength / 3), strength * 3);
    if (strength > 30) throw new NoState("ionic strength");
  }
  throw new Error("the ionic strength does not settle");
}
