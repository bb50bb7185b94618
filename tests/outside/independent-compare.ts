/** Every figure of an independent answer against the kernel's row. */
import type { Master } from "./independent-constants";
import { polish } from "./independent-polish";
import { type PlainOutcome, strongIons } from "./independent-reaction";
import type { PlainProblem } from "./independent-solver";
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
  /** The second way's searches found nothing, but its balances, in decimals, hold at the kernel's state. */
  isConfirmed: boolean;
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
  const found = { seed, label: drawn.label, draw: drawn, solved, answer, worst: 0, worstName: "", misses: [] as string[], isConfirmed: false };
  if (typeof answer === "string") {
    if (solved.status !== "ok") return found;
    const confirmed = confirm(drawn.problem, solved.values);
    if (!confirmed) return { ...found, misses: [`ok, though ${answer}`] };
    return { ...found, answer: confirmed, isConfirmed: true, ...compare(confirmed, solved.values) };
  }
  if (solved.status !== "ok") { found.misses.push(`${solved.status}: ${solved.message}`); return found; }
  return { ...found, ...compare(answer, solved.values) };
}

const FREE: Record<Master, string> = {
  H: "H^+", CO3: "CO3^2-", Ca: "Ca^2+", Mg: "Mg^2+", Na: "Na^+", K: "K^+", NH4: "NH4^+", Sr: "Sr^2+", Ba: "Ba^2+", Al: "Al^3+", Cl: "Cl^-", NO3: "NO3^-", NO2: "NO2^-",
  SO4: "SO4^2-", F: "F^-", PO4: "PO4^3-", Si: "H4SiO4",
};

/**
 * Where a saturation and a balance nearly say the same thing a state exists in a sliver of ionic strength, and the nested searches step over it.
 * The second way's plain balances can still judge the state that the kernel returned: corrected in decimals until they hold to 34 digits, it
 * must not move. @returns the corrected state, or null where it is none.
 */
function confirm(problem: PlainProblem | null, values: Record<string, number>): PlainOutcome | null {
  if (!problem) return null;
  const ln = Object.fromEntries(Object.entries(FREE).map(([m, name]) => {
    const lg = values[`lgActivity:${name}`];
    return [m, Number.isNaN(lg) ? -3000 : lg * Math.LN10];
  })) as Record<Master, number>;
  const solutes = Object.entries(values).reduce((sum, [name, value]) => sum + (name.startsWith("conc:") ? value : 0), 0);
  try {
    return { state: polish(problem, ln, { strength: values.ionicStrength, solutes }, () => 0), dissolved: {}, gasTaken: 0 };
  } catch {
    return null;
  }
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
