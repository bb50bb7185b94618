/**
 * The two borders inside the chemistry:
 *   job spec (words, units)  --resolveJob-->  ResolvedJob (numbers in base units)  --compileJob-->  CompiledJob (solves rows).
 * Base units: mol/kg water, eq/kg, atm, °C, m; DOC alone stays in mg C/L (chemistry.md section 8).
 */
import type { ConstantsSet } from "@/lib/chemistry/data/constants-set";
import type { ColumnDescriptor } from "@/lib/schemas/columns";

export type ActivityModel = "ideal" | "guntelberg" | "davies" | "debye-huckel" | "truesdell-jones";
export type OrganicModelName = "none" | "oliver-1983" | "hruska-2003" | "driscoll-1994" | "own";
export type ProtonFact = "charge" | "ANC" | "alkalinity" | "pH";
export type CarbonFact = "pCO2" | "DIC" | "saturated";

/** A pressure is either known in atm or a dry mole fraction that waits for the row's altitude and temperature. */
export type Pressure = { atm: number } | { dryFraction: number };

/** A fault of one row's values: its rows come out `invalid` with this message, the job goes on. */
export interface RowFault { code: string; column: string | null; message: string }

export interface ResolvedWater {
  id: string;
  site: string | null;
  date: string | null;
  /** °C; null when the row gives none (a case or an axis may). */
  temperature: number | null;
  pH: number | null;
  pHTemperature: number | null;
  altitude: number | null;
  pressureAtm: number | null;
  conductivity: number | null;
  /** mol/kg by analyte key (Na … Si), only those given; values below their limit already replaced as the spec says. */
  totals: Record<string, number>;
  /** eq/kg */
  alkalinity: number | null;
  /** eq/kg */
  ANC: number | null;
  /** mol/kg */
  DIC: number | null;
  /** mg C/L */
  DOC: number | null;
  pCO2: Pressure | null;
  /** True where Al was given together with its fraction. */
  aluminiumFractionGiven: boolean;
  faults: RowFault[];
  warnings: string[];
}

export interface ResolvedSolid {
  name: string;
  supply: "excess" | "may-form" | number; // number: mol/kg that may dissolve
  /** SI to be reached. */
  saturation: number;
  /** log K at the water's temperature, overriding the constants set. */
  logK: number | null;
}

export interface ResolvedCase {
  name: string;
  /** The two facts, in any order: pH with alkalinity and DIC with pCO2 are pairs too, so there is no "one of each". */
  close: { facts: readonly [ProtonFact | CarbonFact, ProtonFact | CarbonFact]; saturated: { solid: string; SI: number } | null };
  /** Values given by the case; they win over the row's. Units as in ResolvedWater. */
  given: Partial<Pick<ResolvedWater,
    "temperature" | "pH" | "pHTemperature" | "altitude" | "pressureAtm" | "alkalinity" | "ANC" | "DIC" | "DOC" | "pCO2">>
    & { totals?: Record<string, number> };
  activity: ActivityModel;
  organic: {
    model: OrganicModelName;
    /** Conditional pKa values in order (own, hruska, driscoll); empty for oliver and none. */
    pKa: number[];
    /** mol of sites per mg C. */
    sitesPerMgC: number;
  };
  complexes: "all" | "none" | string[];
  /** log K at the water's temperature by species, solid or reaction name. */
  constants: Record<string, { logK: number }>;
  react: null | { gas: "closed" | "open" | Pressure; solids: ResolvedSolid[] };
}

export interface ResolvedAxis {
  /** The field as written, e.g. "pCO2", "Na", "react/solids/calcite/saturation", "constants/calcite/logK". */
  field: string;
  /** What the values are shown in, e.g. "atm", "mmol/L", "°C", "". */
  unit: string;
  /** As shown in the results. */
  shown: Float64Array;
  /** In base units, same length. A dry fraction keeps its fraction and sets isDryFraction. */
  base: Float64Array;
  isDryFraction: boolean;
}

export interface ResolvedJob {
  waters: ResolvedWater[];
  cases: ResolvedCase[];
  axes: ResolvedAxis[];
  missing: "refuse" | "zero";
  /** Column names and groups as asked for. */
  report: string[];
  /** Default unit per column as the spec gives it, which derivatives by that column are taken in. */
  units?: Readonly<Record<string, string>>;
  /** The built-in set where left out. */
  constantsSet?: ConstantsSet;
  solver: { tolerance: number; maxIterations: number };
}

/** Status codes as stored in blocks. */
export const STATUS = { ok: 0, notConverged: 1, invalid: 2 } as const;
export const STATUS_NAMES = ["ok", "not-converged", "invalid"] as const;

/** Result rows [from, from+count) as columns. Failed rows have NaN in every value (null when shown). */
export interface SolvedRows {
  from: number;
  count: number;
  status: Uint8Array;
  /** Index into `texts`; 0 is the empty text. */
  message: Int32Array;
  /** Index into `texts`; several warnings of a row are joined by "; ". */
  warnings: Int32Array;
  iterations: Int32Array;
  residual: Float64Array;
  /** One array per entry of CompiledJob.columns. */
  values: Float64Array[];
  texts: string[];
}

export interface CompiledJob {
  rowCount: number;
  waterIds: string[];
  caseNames: string[];
  axes: { field: string; unit: string; shown: Float64Array }[];
  /** Grid points per water and case (product of axis lengths, 1 without axes). Row = (water·cases + case)·points + point; first axis outermost. */
  pointsPerCase: number;
  /** The value columns, in order, after the leading ones (water, case, axes, status, message, warnings, iterations, residual). */
  columns: ColumnDescriptor[];
  /**
   * Solve rows [from, to). The answer depends on the spec alone, not on how rows are cut into calls, provided that
   * `from` is a multiple of 256 (warm starts restart there).
   */
  solve(from: number, to: number): SolvedRows;
}
