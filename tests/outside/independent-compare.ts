/** Every figure of an independent answer against the kernel's row. */
import { type PlainOutcome, strongIons } from "./independent-reaction";
import { draw, type Draw } from "./random-waters";
import { type SolvedRow, solveSpec } from "./solve-spec";

/** Agreement asked of every concentration above LEAST, of pressures and sums; of pH and saturation indices as that share of one unit of ln. */
export const AGREEMENT = 1e-8;
const LEAST = 1e-20;

export interface Comparison {
  seed: number;
  label: string;
  draw: Draw;
  solved: SolvedRow;
  /** The independent answer, or why it finds no state. */
  answer: PlainOutcome | string;
  /** Largest relative deviation of a concentration, and which. */
  worst: number;
  worstName: string;
  misses: string[];
}

/** The water of a seed solved both ways; null where the seed admits none. */
export function compareSeed(seed: number): Comparison | null {
  const drawn = draw(seed);
  if (!drawn) return null;
  const answer = drawn.answer();
  const [solved] = solveSpec(drawn.spec);
  const found = { seed, label: drawn.label, draw: drawn, solved, answer, worst: 0, worstName: "", misses: [] as string[] };
  if (typeof answer === "string") {
    if (solved.status === "ok") found.misses.push(`ok, though ${answer}`);
    return found;
  }
  if (solved.status !== "ok") { found.misses.push(`${solved.status}: ${solved.message}`); return found; }
  return { ...found, ...compare(answer, solved.values) };
}

function compare({ state, dissolved, gasTaken }: PlainOutcome, values: Record<string, number>): Pick<Comparison, "worst" | "worstName" | "misses"> {
  const misses: string[] = [];
  let worst = 0;
  let worstName = "";
  const check = (name: string, wanted: number, tolerance: number) => {
    const got = values[name];
    if (!(Math.abs(got - wanted) <= tolerance)) misses.push(`${name}: ${got} instead of ${wanted}`);
  };
  for (const [name, conc] of Object.entries(state.conc)) {
    if (!(conc > LEAST)) continue;
    check(`conc:${name}`, conc, AGREEMENT * conc);
    const off = Math.abs(values[`conc:${name}`] / conc - 1);
    if (!(off <= worst)) { worst = off; worstName = name; }
  }
  check("pH", state.pH, AGREEMENT);
  check("pCO2", state.pCO2, AGREEMENT * state.pCO2);
  check("DIC", state.DIC, AGREEMENT * state.DIC);
  check("ionicStrength", state.ionicStrength, AGREEMENT * state.ionicStrength);
  // Sums may cancel: what they are held to is a share of the ions they are made of.
  const size = state.ionicStrength * 1e6 * AGREEMENT;
  check("ANC", (strongIons(state.totals) - state.charge) * 1e6, size);
  check("alkalinity", state.alkalinity * 1e6, size);
  check("chargeError", state.charge * 1e6, size);
  for (const [name, SI] of Object.entries(state.SI)) {
    if (SI === null) { if (!Number.isNaN(values[`SI:${name}`])) misses.push(`SI:${name}: ${values[`SI:${name}`]} where its ions are absent`); } else check(`SI:${name}`, SI, AGREEMENT);
  }
  for (const [name, amount] of Object.entries(dissolved)) check(`solid:${name}`, amount * 1e3, AGREEMENT * Math.max(Math.abs(amount), state.ionicStrength) * 1e3);
  check("gas:CO2", gasTaken * 1e3, AGREEMENT * Math.max(Math.abs(gasTaken), state.DIC) * 1e3);
  return { worst, worstName, misses };
}
