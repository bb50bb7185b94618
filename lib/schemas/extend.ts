/** `extend`: species, solids and analytes that a spec brings itself. */
import { z } from "zod";

export const OWN_SPECIES = 200;
export const OWN_SOLIDS = 100;
export const OWN_ANALYTES = 20;

const described = <T extends z.ZodType>(schema: T, description: string, examples?: unknown[]): T =>
  schema.meta({ description, ...(examples ? { examples } : {}) }) as T;

/** Coefficients of log K = a + bT·T + c/T + d·log10 T + e/T², T in kelvin, by the name of what each multiplies. */
export const COEFFICIENTS = ["a", "bT", "c/T", "d·log10T", "e/T2"] as const;

const counts = z.record(z.string().min(1).max(60), z.number().min(-20).max(20));
const logKFields = {
  logK: described(z.number().min(-200).max(200).optional(), "log10 K at 25 °C and infinite dilution", [2.1]),
  reactionEnthalpy: described(z.union([z.number(), z.string().max(60)]).optional(), "Enthalpy of the reaction: log K over temperature by van 't Hoff; kJ/mol when a bare number, or kcal/mol", ["5 kJ/mol"]),
  a: described(z.number().optional(), "Constant term of log K over temperature"),
  bT: described(z.number().optional(), "Coefficient of T (kelvin)"),
  "c/T": described(z.number().optional(), "Coefficient of 1/T"),
  "d·log10T": described(z.number().optional(), "Coefficient of log10 T"),
  "e/T2": described(z.number().optional(), "Coefficient of 1/T²"),
};
const provenance = {
  source: described(z.string().max(300).optional(), "Where the figures come from"),
  note: described(z.string().max(300).optional(), "Anything to know beside them"),
};
const ionFields = {
  ionSize: described(z.number().min(1).max(20).optional(), "Ion size of the extended Debye–Hückel model, Å; 4 where left out"),
  conductance: described(z.number().min(0).max(1000).optional(), "Limiting equivalent conductance at 25 °C, S·cm²/eq, of a free ion"),
};

export const ownSpeciesSchema = z.strictObject({
  from: described(counts, "What one of it is formed from, as counts; what is given off counts negative", [{ "Ca^2+": 1, "X^-": 1 }, { "Zn^2+": 1, H2O: 1, "H^+": -1 }]),
  formula: described(z.string().max(60).optional(), "Its formula, where the name is none"),
  ...logKFields, ...ionFields, ...provenance,
});

export const ownSolidSchema = z.strictObject({
  into: described(counts, "What one formula unit dissolves into, as counts; what it takes up counts negative", [{ "Ca^2+": 1, "X^-": 2 }]),
  formula: described(z.string().max(60).optional(), "Its formula", ["CaX2"]),
  ...logKFields, ...provenance,
});

export const ownAnalyteSchema = z.strictObject({
  species: described(z.string().min(1).max(60), "The free species whose total it is, a new one, with its charge", ["X^-", "Zn^2+"]),
  formula: described(z.string().max(60).optional(), "Formula a mass is counted in; the species' own where left out"),
  molarMass: described(z.number().positive().max(5000).optional(), "g/mol; needed where the formula is no formula of known elements"),
  strong: described(z.boolean().optional(), "Whether it counts among the strong ions of the ANC; by default cations, and anions that take up no proton"),
  defaultUnit: described(z.string().max(60).optional(), "Unit of a bare number; mg/L where left out"),
  description: described(z.string().max(200).optional(), "What it is"),
  ...ionFields, ...provenance,
});

export const extendSchema = z.strictObject({
  species: described(z.record(z.string().max(60), ownSpeciesSchema).optional(), "Aqueous species by name, charge included, such as CaX^+"),
  solids: described(z.record(z.string().max(60), ownSolidSchema).optional(), "Solids by name"),
  analytes: described(z.record(z.string().max(30), ownAnalyteSchema).optional(), "Analytes by the key that rows, units and axes then take"),
});

export type Extend = z.infer<typeof extendSchema>;
export type OwnSpecies = z.infer<typeof ownSpeciesSchema>;
export type OwnSolid = z.infer<typeof ownSolidSchema>;
export type OwnAnalyte = z.infer<typeof ownAnalyteSchema>;
