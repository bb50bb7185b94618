/** Shapes of the constants set. Data files beside this one hold values only and import nothing but these types. */

/** Where a figure comes from. `fromMemory` marks figures written down from memory of the source (chemistry.md `mem`). */
export interface Source {
  /** Key into SOURCES, e.g. "plummer-busenberg-1982". */
  source: string;
  fromMemory: boolean;
  note?: string;
}

/** log10 K over temperature; T in kelvin. Analytic: a + bT + c/T + d·log10 T + e/T². Van 't Hoff: from 25 °C and ΔH (kJ/mol). */
export type LogKOverT =
  | { form: "analytic"; a: number; bT: number; cOverT: number; dLog10T: number; eOverT2: number; logK25: number }
  | { form: "vantHoff"; logK25: number; reactionEnthalpy: number };

/**
 * Components, the basis in which every reaction is rewritten. `H^+`, `H2O` and one reference species per balance:
 * neutral CO2(aq) for carbon, H4SiO4 for silicon, H2PO4^- for phosphorus, NH4^+ for ammonium, the bare ion elsewhere.
 */
export type ComponentKey =
  | "H^+" | "CO2(aq)" | "Na^+" | "K^+" | "NH4^+" | "Ca^2+" | "Mg^2+" | "Sr^2+" | "Ba^2+" | "Al^3+"
  | "Cl^-" | "NO3^-" | "NO2^-" | "SO4^2-" | "F^-" | "H2PO4^-" | "H4SiO4";

export interface Species {
  /** IUPAC plain text with charge, e.g. "Ca^2+", "Al(OH)2^+", "CO2(aq)". */
  name: string;
  charge: number;
  /** Element counts of the formula (hydrogen and oxygen included). */
  composition: Record<string, number>;
  /** The reaction as printed in the source: products positive, reactants negative, `H2O` and `H^+` included; null for a component. */
  reaction: Record<string, number> | null;
  logK: (LogKOverT & Source) | null;
  /** Kielland ion size in Å; null for neutral species. */
  ionSize: number | null;
  /** Truesdell–Jones å and b where the 1974 table lists the ion. */
  truesdellJones: { a: number; b: number } | null;
  /** A pair of a metal with a ligand other than hydroxide: left out by `complexes: "none"`. */
  isComplex: boolean;
  /** Limiting equivalent conductance at 25 °C, S·cm²/eq, where listed. */
  conductance: number | null;
}

export interface Solid {
  name: string;
  formula: string;
  /** g/mol, where the formula holds a spec's own elements. */
  molarMass?: number;
  composition: Record<string, number>;
  /** Dissolution as printed: the solid has −1 and is left out; other terms as in Species.reaction. */
  reaction: Record<string, number>;
  logK: LogKOverT & Source;
  /** Metals that do not count as strong bases while this carbonate solid is in excess (chemistry.md section 8). */
  conservedWithout: string[];
}

export type AnalyteKey =
  | "Na" | "K" | "NH4" | "Ca" | "Mg" | "Sr" | "Ba" | "Al" | "Cl" | "NO3" | "NO2" | "SO4" | "F" | "PO4" | "Si" | "alkalinity" | "ANC" | "DIC" | "DOC";

export interface Analyte {
  /** Key in rows: an AnalyteKey (Na, K, … DOC), or that of a spec's own analyte. */
  key: string;
  /** Words of the trade that mean the same on a typed line or a CSV header, lower case. */
  synonyms: string[];
  /** Synonyms whose mass is counted in another formula than `formula`: silica as SiO2, bicarbonate as HCO3. */
  namedBasis?: Record<string, string>;
  kind: "total" | "equivalents" | "carbon" | "organic";
  /** A ComponentKey, or the free species of a spec's own analyte. */
  component: string | null;
  /** Formula a bare mass is counted in ("NO3" for NO3, "Si" for Si, "C" for DIC and DOC). */
  formula: string;
  molarMass: number;
  /** Signed equivalents per mole in the strong-ion sum (0 for the others). */
  strongCharge: number;
  defaultUnit: string;
  description: string;
}
