/** Solves drawn rows and judges every outcome: `ok` by a certificate computed again, `invalid` by its witness or a second method. */
import { type CaseSolver, makeCaseSolver } from "@/lib/chemistry/case-solver";
import { planColumns } from "@/lib/chemistry/column-plan";
import { columnValues } from "@/lib/chemistry/column-values";
import { type ResolvedCase, type ResolvedJob, type ResolvedWater, STATUS } from "@/lib/chemistry/types";
import { drawCase, drawWater, WATERS_PER_CASE } from "./draw";
import { atmOf, checkFacts, checkKept, Recomputed, type Values } from "./recompute";
import { refute } from "./second-method";

/** Relative error, and error of a logarithm, above which an `ok` is false. */
const TOLERANCE = 1e-9;
const MOST_SHOWN = 40;

export interface Tally { rows: number; ok: number; invalid: number; notConverged: number; falseOk: number; falseInvalid: number; thrown: number }
export interface FuzzReport { tally: Tally; reasons: Map<string, number>; warnings: Map<string, number>; offenders: { row: number; what: string; why: string }[]; worst: number; slowest: { row: number; ms: number } }

export interface FuzzOptions { rows: number; seed: number; from?: number; onRow?: (row: number, text: string) => void }

interface Stage { solver: CaseSolver; read: () => Values }

function makeStage(kase: ResolvedCase): Stage {
  const job: ResolvedJob = { waters: [], cases: [kase], axes: [], missing: "zero", report: ["species", "activities", "solids", "gas:CO2"], solver: { tolerance: 1e-10, maxIterations: 100 } };
  const solver = makeCaseSolver(job, kase);
  const columns = planColumns(job.report, [solver]);
  const values = columnValues(columns, solver);
  return { solver, read: () => { const out: Values = {}; for (let k = 0; k < columns.length; k++) out[columns[k].name] = values[k](); return out; } };
}

class FuzzCase {
  readonly main: Stage;
  readonly sampled: Stage;
  readonly overrides: Record<string, number> = {};
  /** Two facts that always have a state, where the case's own may have none: waters take their facts from it, most of the time. */
  private readonly reference: Stage | null;

  constructor(readonly kase: ResolvedCase) {
    this.main = makeStage(kase);
    for (const [name, { logK }] of Object.entries(kase.constants)) this.overrides[name] = logK;
    for (const solid of kase.react?.solids ?? []) if (solid.logK !== null) this.overrides[solid.name] = solid.logK;
    const constants = Object.fromEntries(Object.entries(this.overrides).map(([name, logK]) => [name, { logK }]));
    this.sampled = kase.react ? makeStage({ ...kase, react: null, constants }) : this.main;
    const { facts } = kase.close;
    const isLoose = facts.includes("pH") && !facts.includes("pCO2") && !facts.includes("DIC") && !facts.includes("saturated") || (facts.includes("DIC") && facts.includes("pCO2"));
    this.reference = isLoose ? makeStage({ ...kase, close: { facts: [facts.includes("charge") ? "charge" : "ANC", "pCO2"], saturated: null }, react: null, constants }) : null;
  }

  /** The water with facts that belong together, for three of four waters. */
  agreed(water: ResolvedWater, row: number): ResolvedWater {
    if (!this.reference || row % 4 === 3 || water.temperature === null) return water;
    const { solver, read } = this.reference;
    const settlesAt = this.kase.close.facts.includes("pH") && water.pHTemperature !== null ? water.pHTemperature : water.temperature;
    solver.solve({ ...water, temperature: settlesAt }, 0);
    if (solver.status !== STATUS.ok) return water;
    const state = new Recomputed(read(), this.kase, settlesAt, this.overrides);
    const pH = -state.values["lgActivity:H^+"];
    return pH > -2 && pH < 16 ? { ...water, pH, DIC: state.carbon().value, alkalinity: state.alkalinity().value } : water;
  }

  /** Largest error of a row that the solver called ok, over its stages, and where it is. */
  certify(water: ResolvedWater): { worst: number; what: string } {
    const { kase } = this;
    const celsius = water.temperature!;
    const settlesAt = kase.close.facts.includes("pH") && water.pHTemperature !== null ? water.pHTemperature : celsius;
    const stages: Recomputed[] = [];
    const add = (stage: Stage, w: ResolvedWater, t: number): boolean => {
      stage.solver.solve(w, 0);
      if (stage.solver.status !== STATUS.ok) return false;
      const state = new Recomputed(stage.read(), kase, t, this.overrides);
      state.massAction();
      stages.push(state);
      return true;
    };
    const failed = (what: string) => ({ worst: Infinity, what });
    if (!add(this.sampled, { ...water, temperature: settlesAt, pHTemperature: null, pCO2: water.pCO2 && { atm: atmOf(water.pCO2, settlesAt, water) } }, settlesAt)) return failed("its facts alone have no state");
    checkFacts(stages[0], water);
    if (settlesAt !== celsius) {
      if (!add(this.sampled, water, celsius)) return failed("its own temperature has no state");
      checkKept(withoutReaction(stages[0]), withoutReaction(stages[1]), NaN);
    }
    if (kase.react) {
      if (!add(this.main, water, celsius)) return failed("not ok when solved again");
      const { gas } = kase.react;
      checkKept(stages[stages.length - 2], stages[stages.length - 1], gas === "closed" ? NaN : atmOf(gas === "open" ? water.pCO2 : gas, celsius, water));
    }
    return stages.reduce((most, each) => (each.worst > most.worst ? { worst: each.worst, what: each.what } : most), { worst: 0, what: "" });
  }
}

function withoutReaction(state: Recomputed): Recomputed {
  const bare = new Recomputed(state.values, { ...state.kase, react: null }, state.celsius, state.overrides);
  bare.note = (error, what) => state.note(error, what);
  return bare;
}

const wordOf = (text: string) => text.replace(/-?\d+(\.\d+)?(e[-+]?\d+)?/g, "#").split(/[:;]/).slice(0, 2).join(":").slice(0, 100);

export function fuzz(options: FuzzOptions): FuzzReport {
  const { rows, seed, from = 0, onRow } = options;
  const tally: Tally = { rows, ok: 0, invalid: 0, notConverged: 0, falseOk: 0, falseInvalid: 0, thrown: 0 };
  const report: FuzzReport = { tally, reasons: new Map(), warnings: new Map(), offenders: [], worst: 0, slowest: { row: -1, ms: 0 } };
  const count = (map: Map<string, number>, key: string) => map.set(key, (map.get(key) ?? 0) + 1);
  const offend = (row: number, what: "notConverged" | "falseOk" | "falseInvalid" | "thrown", why: string) => {
    tally[what]++;
    count(report.reasons, `${what}: ${wordOf(why)}`);
    if (report.offenders.length < MOST_SHOWN) report.offenders.push({ row, what, why });
  };
  let index = -1;
  let current: FuzzCase | null = null;
  for (let row = from; row < from + rows; row++) {
    try {
      if (!current || Math.floor(row / WATERS_PER_CASE) !== index) { index = Math.floor(row / WATERS_PER_CASE); current = new FuzzCase(drawCase(seed, index)); }
      const water = current.agreed(drawWater(seed, row), row);
      const { solver } = current.main;
      const started = performance.now();
      solver.solve(water, 0);
      const ms = performance.now() - started;
      if (ms > report.slowest.ms) report.slowest = { row, ms };
      onRow?.(row, `${["ok", "not-converged", "invalid"][solver.status]} ${solver.message} ${solver.warnings.join("; ")} residual ${solver.residual} iterations ${solver.iterations}`);
      if (solver.status === STATUS.notConverged) offend(row, "notConverged", solver.message);
      else if (solver.status === STATUS.ok) {
        tally.ok++;
        for (const warning of solver.warnings) count(report.warnings, warning.split(":")[0]);
        if (!(solver.residual <= 1e-10)) offend(row, "falseOk", "residual above the tolerance");
        const { worst, what } = current.certify(water);
        if (worst > report.worst) report.worst = worst;
        if (!(worst <= TOLERANCE)) offend(row, "falseOk", `${what} is off by ${worst.toExponential(1)}`);
      } else {
        tally.invalid++;
        count(report.reasons, `invalid ${solver.witness?.kind}: ${wordOf(solver.message)}`);
        const refuted = refute(solver, water);
        if (refuted) offend(row, "falseInvalid", `${solver.message} | ${refuted}`);
      }
    } catch (error) {
      current = null;
      offend(row, "thrown", error instanceof Error ? error.stack ?? error.message : String(error));
    }
  }
  return report;
}
