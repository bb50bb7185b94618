/**
 * The polish of independent-solver.ts: all unknowns of a state (ion activities, ionic strength, sum of solutes, solids) are corrected until
 * the plain balances hold to 34 digits. Residuals are evaluated in decimals; the corrections come from a numerical Jacobian in doubles,
 * which is only as good as 1e-9, so each round gains about that factor.
 */
import Decimal from "decimal.js";
import { CO2_GAS, debyeHuckel, type Master, PLAIN_SOLIDS } from "./independent-constants";
import { LN10, organicLabel, type PlainProblem, type PlainState, solidLogK, solidOf, speciesOf } from "./independent-solver";

const D = Decimal.clone({ precision: 34, toExpNeg: -40, toExpPos: 60 });
const MASTERS: readonly Master[] = ["H", "CO3", "Ca", "Mg", "Na", "K", "NH4", "Sr", "Ba", "Al", "Cl", "NO3", "NO2", "SO4", "F", "PO4", "Si"];

/** The few operations that the balances need, for doubles and for decimals alike. */
interface Field<T> {
  of(x: number): T; add(a: T, b: T): T; sub(a: T, b: T): T; mul(a: T, b: T): T; div(a: T, b: T): T; ten(x: T): T; root(x: T): T; log(x: T): T;
}
const doubles: Field<number> = {
  of: (x) => x, add: (a, b) => a + b, sub: (a, b) => a - b, mul: (a, b) => a * b, div: (a, b) => a / b, ten: (x) => 10 ** x, root: Math.sqrt, log: Math.log10,
};
const decimals: Field<Decimal> = {
  of: (x) => new D(x), add: (a, b) => a.add(b), sub: (a, b) => a.sub(b), mul: (a, b) => a.mul(b), div: (a, b) => a.div(b),
  ten: (x) => D.pow(10, x), root: (x) => x.sqrt(), log: (x) => x.log(10),
};

interface Layout { present: Master[]; solids: string[] }
interface Point<T> { conc: T[]; organics: T[]; sums: Map<Master, T>; charge: T; alkalinity: T; strength: T; solutes: T; products: Map<string, T>; pressure: T }

/** Everything that follows from the unknowns, in either arithmetic. Constants are powered up once per field. */
function makeModel<T>(problem: PlainProblem, layout: Layout, field: Field<T>) {
  const { of, add, sub, mul, div, ten, root, log } = field;
  const species = speciesOf(problem);
  const t = problem.celsius;
  const constants = species.map((each) => ten(of(each.logK(t))));
  const solidK = new Map(PLAIN_SOLIDS.map((solid) => [solid.name, ten(of(solidLogK(problem, solid.name)))]));
  const henry = ten(of(CO2_GAS(t)));
  const { A, B } = debyeHuckel(t);
  const power = (base: T, n: number): T => {
    let value = of(1);
    for (let k = 0; k < Math.abs(n); k++) value = mul(value, base);
    return n < 0 ? div(of(1), value) : value;
  };
  const gammas = (strength: T): ((z: number, size: number | null, tj: [number, number] | null) => T) => {
    const kept = new Map<string, T>();
    const r = root(strength);
    const exponent = (z: number, size: number, tj: [number, number] | null): T => {
      const lead = of(-A * z * z);
      if (problem.model === "guntelberg") return mul(lead, div(r, add(of(1), r)));
      if (problem.model === "davies") return mul(lead, sub(div(r, add(of(1), r)), mul(of(0.3), strength)));
      const a = problem.model === "truesdell-jones" && tj ? tj[0] : size;
      const debye = mul(lead, div(r, add(of(1), mul(of(B * a), r))));
      return problem.model === "truesdell-jones" && tj ? add(debye, mul(of(tj[1]), strength)) : debye;
    };
    return (z, size, tj) => {
      if (problem.model === "ideal") return of(1);
      const key = z === 0 ? "0" : `${z * z}/${size}/${tj?.join(",") ?? ""}`;
      let value = kept.get(key);
      if (value === undefined) {
        value = ten(z === 0 ? mul(of(0.1), strength) : exponent(z, size ?? 0, tj));
        kept.set(key, value);
      }
      return value;
    };
  };
  const organicPart = (h: T, gammaH: T): T[] => {
    const { organic } = problem;
    if (organic.kind === "none" || organic.acid === 0) return [];
    const pH = sub(of(0), log(h));
    const steps = organic.kind === "oliver" ? [sub(add(of(0.96), mul(of(0.9), pH)), mul(of(0.039), mul(pH, pH)))] : organic.pK.map(of);
    const weights = [of(1)];
    for (const pK of steps) weights.push(div(mul(weights[weights.length - 1], mul(ten(sub(of(0), pK)), gammaH)), h));
    const all = weights.reduce(add);
    return weights.map((weight) => div(mul(of(organic.acid), weight), all));
  };
  return (unknowns: T[]): Point<T> => {
    const activity = new Map(layout.present.map((m, k) => [m, unknowns[k]]));
    const strength = unknowns[layout.present.length];
    const solutesIn = unknowns[layout.present.length + 1];
    const water = problem.model === "ideal" ? of(1) : sub(of(1), mul(of(0.017), solutesIn));
    const gamma = gammas(strength);
    const conc = species.map((each, i) => {
      let value = constants[i];
      for (const [m, n] of Object.entries(each.parts) as [Master, number][]) {
        const a = activity.get(m);
        if (a === undefined) return of(0);
        value = mul(value, power(a, n));
      }
      return div(mul(value, power(water, each.water)), gamma(each.z, each.size, each.tj));
    });
    const h = activity.get("H") as T;
    const organics = organicPart(h, gamma(1, 9, null));
    const total = (weight: (i: number) => number, organic: (lost: number) => number): T => {
      let sum = of(0);
      conc.forEach((c, i) => { const w = weight(i); if (w !== 0) sum = add(sum, mul(of(w), c)); });
      organics.forEach((c, lost) => { const w = organic(lost); if (w !== 0) sum = add(sum, mul(of(w), c)); });
      return sum;
    };
    const products = new Map<string, T>();
    for (const solid of PLAIN_SOLIDS) {
      let value = power(water, solid.water);
      let isThere = true;
      for (const [m, n] of Object.entries(solid.parts) as [Master, number][]) {
        const a = activity.get(m);
        if (a === undefined) isThere = false; else value = mul(value, power(a, n));
      }
      if (isThere) products.set(solid.name, div(value, solidK.get(solid.name) as T));
    }
    const co2 = species.findIndex((each) => each.name === "CO2(aq)");
    return {
      conc, organics, products,
      sums: new Map(layout.present.map((m) => [m, total((i) => species[i].parts[m] ?? 0, () => 0)])),
      charge: total((i) => species[i].z, (lost) => -lost), alkalinity: total((i) => species[i].alkalinity, () => 0),
      strength: total((i) => species[i].z ** 2 / 2, (lost) => lost * lost / 2), solutes: total(() => 1, () => 1),
      pressure: div(mul(conc[co2], gamma(0, null, null)), henry),
    };
  };
}

/** The equations, each divided by the size of what it balances. */
function makeResiduals<T>(problem: PlainProblem, layout: Layout, field: Field<T>, sizes: number[]) {
  const { of, sub, mul, div, add } = field;
  const model = makeModel(problem, layout, field);
  const supplied = (m: Master, unknowns: T[]): T => layout.solids.reduce((sum, name, k) => {
    const n = solidOf(name).parts[m] ?? 0;
    return n === 0 ? sum : add(sum, mul(of(n), unknowns[layout.present.length + 2 + k]));
  }, of(0));
  const residuals = (unknowns: T[]): { values: T[]; point: Point<T> } => {
    const point = model(unknowns);
    const values: T[] = [];
    const push = (value: T) => values.push(div(value, of(sizes[values.length] ?? 1)));
    for (const m of layout.present) {
      if (m === "H" || m === "CO3") continue;
      push(sub(sub(point.sums.get(m) as T, of(problem.totals[m] ?? 0)), supplied(m, unknowns)));
    }
    for (const fact of problem.facts) {
      if (fact.is === "charge") push(sub(point.charge, of(fact.value)));
      else if (fact.is === "alkalinity") push(sub(point.alkalinity, of(fact.value)));
      else if (fact.is === "DIC") push(sub(sub(point.sums.get("CO3") as T, of(fact.value)), supplied("CO3", unknowns)));
      else if (fact.is === "pH") push(sub(div(unknowns[layout.present.indexOf("H")], field.ten(of(-fact.value))), of(1)));
      else if (fact.is === "pCO2") push(sub(div(point.pressure, of(fact.value)), of(1)));
      else if (fact.is === "saturated") push(sub(div(point.products.get(fact.solid) as T, field.ten(of(fact.value))), of(1)));
    }
    for (const name of layout.solids) {
      const SI = problem.held.find((each) => each.solid === name)?.SI ?? 0;
      push(sub(div(point.products.get(name) as T, field.ten(of(SI))), of(1)));
    }
    push(sub(div(point.strength, unknowns[layout.present.length]), of(1)));
    push(sub(div(point.solutes, unknowns[layout.present.length + 1]), of(1)));
    return { values, point };
  };
  return residuals;
}

/** Gaussian elimination with row exchange; plain and small. */
function solveLinear(matrix: number[][], right: number[]): number[] {
  const n = right.length;
  const rows = matrix.map((row, i) => [...row, right[i]]);
  for (let k = 0; k < n; k++) {
    let best = k;
    for (let i = k + 1; i < n; i++) if (Math.abs(rows[i][k]) > Math.abs(rows[best][k])) best = i;
    [rows[k], rows[best]] = [rows[best], rows[k]];
    for (let i = k + 1; i < n; i++) {
      const factor = rows[i][k] / rows[k][k];
      if (factor !== 0) for (let j = k; j <= n; j++) rows[i][j] -= factor * rows[k][j];
    }
  }
  const x = new Array<number>(n).fill(0);
  for (let k = n - 1; k >= 0; k--) {
    let value = rows[k][n];
    for (let j = k + 1; j < n; j++) value -= rows[k][j] * x[j];
    x[k] = value / rows[k][k];
  }
  return x;
}

/** Sizes for the equations and the solids, from the state found so far. */
function equationSizes(problem: PlainProblem, layout: Layout, point: Point<number>): number[] {
  const species = speciesOf(problem);
  const size = (weight: (i: number) => number) => point.conc.reduce((sum, c, i) => sum + Math.abs(weight(i)) * c, 0);
  const sizes = layout.present.filter((m) => m !== "H" && m !== "CO3").map((m) => size((i) => species[i].parts[m] ?? 0));
  for (const fact of problem.facts) {
    if (fact.is === "charge") sizes.push(size((i) => species[i].z) + point.organics.reduce((sum, c, lost) => sum + c * lost, 0));
    else if (fact.is === "alkalinity") sizes.push(size((i) => species[i].alkalinity));
    else if (fact.is === "DIC") sizes.push(size((i) => species[i].parts.CO3 ?? 0));
    else sizes.push(1);
  }
  return sizes;
}

/** Corrects a state to full decimal precision and reads the result off. */
export function polish(
  problem: PlainProblem, ln: Record<Master, number>, start: { strength: number; solutes: number }, amountOf: (solid: string) => number,
): PlainState {
  const layout: Layout = { present: MASTERS.filter((m) => ln[m] > -2000), solids: problem.held.map((each) => each.solid) };
  const first = [...layout.present.map((m) => Math.exp(ln[m])), start.strength, start.solutes, ...layout.solids.map(amountOf)];
  const sizes = equationSizes(problem, layout, makeModel(problem, layout, doubles)(first));
  const inDoubles = makeResiduals(problem, layout, doubles, sizes);
  const inDecimals = makeResiduals(problem, layout, decimals, sizes);
  const n = first.length;
  const isAmount = (k: number) => k >= layout.present.length + 2;
  // A solid's amount may be zero: its unit is the strength of the water, everything else moves in relative terms.
  const unit = (k: number) => (isAmount(k) ? start.strength : first[k]);
  const jacobian = first.map(() => new Array<number>(n).fill(0));
  const step = 1e-6;
  for (let k = 0; k < n; k++) {
    const side = (sign: number) => inDoubles(first.map((x, j) => (j === k ? x + sign * step * unit(k) : x))).values;
    const up = side(1);
    const down = side(-1);
    for (let i = 0; i < n; i++) jacobian[i][k] = (up[i] - down[i]) / (2 * step);
  }
  let unknowns = first.map((x) => new D(x));
  let lastStep = Infinity;
  for (let round = 0; round < 12 && lastStep > 1e-20; round++) {
    const right = inDecimals(unknowns).values.map((value) => -value.toNumber());
    const moves = solveLinear(jacobian, right);
    lastStep = Math.max(...moves.map(Math.abs));
    if (!(lastStep < 0.05)) throw new Error(`the polish moves by ${lastStep} in round ${round}: the state it started from is not one`);
    unknowns = unknowns.map((x, k) => x.add(new D(moves[k]).mul(unit(k))));
  }
  return readState(problem, layout, unknowns, inDecimals(unknowns).point, lastStep);
}

function readState(problem: PlainProblem, layout: Layout, unknowns: Decimal[], point: Point<Decimal>, lastStep: number): PlainState {
  const conc = Object.fromEntries(speciesOf(problem).map((each, i) => [each.name, point.conc[i].toNumber()]));
  point.organics.forEach((amount, lost) => { conc[organicLabel(point.organics.length - 1, lost)] = amount.toNumber(); });
  const lg = (x: Decimal | undefined): number | null => (x === undefined ? null : Math.log(x.toNumber()) / LN10);
  return {
    problem, conc, lastStep,
    pH: -(D.log10(unknowns[layout.present.indexOf("H")]).toNumber()),
    pCO2: point.pressure.toNumber(), DIC: point.sums.get("CO3")?.toNumber() ?? 0, ionicStrength: point.strength.toNumber(),
    charge: point.charge.toNumber(), alkalinity: point.alkalinity.toNumber(),
    totals: Object.fromEntries([...point.sums].map(([m, value]) => [m, value.toNumber()])),
    dissolved: Object.fromEntries(layout.solids.map((name, k) => [name, unknowns[layout.present.length + 2 + k].toNumber()])),
    SI: Object.fromEntries(PLAIN_SOLIDS.map((solid) => [solid.name, lg(point.products.get(solid.name))])),
  };
}
