/**
 * The job spec, version 1: the one description of the document. The API's validation, the OpenAPI document, the editor's completion and
 * the console are all derived from it. What no schema can say (units, names that depend on each other, facts that go together) is
 * looked at in lib/chemistry/check-spec.ts.
 */
import { z } from "zod";
import { BUILT_IN, type ConstantsSet } from "@/lib/chemistry/data/constants-set";
import type { AnalyteKey } from "@/lib/chemistry/data/types";
import { extendSchema } from "@/lib/schemas/extend";

const names = (all: readonly { name: string }[]): [string, ...string[]] => all.map((each) => each.name) as [string, ...string[]];
export const WATERS_PER_SPEC = 100_000;
export const CASES_PER_SPEC = 100;
export const AXES_PER_SPEC = 6;
export const POINTS_PER_AXIS = 100_000;

const described = <T extends z.ZodType>(schema: T, description: string, examples?: unknown[]): T =>
  schema.meta({ description, ...(examples ? { examples } : {}) }) as T;

const quantityObject = z.strictObject({
  value: described(z.number(), "The number, in `unit`"),
  unit: described(z.string().max(60).optional(), "Unit; the column's default where left out"),
  as: described(z.string().max(40).optional(), "Formula that a mass is counted in: N, P, S, C, Si, CaCO3, HCO3, SiO2 …"),
  below: described(z.boolean().optional(), "true: the value is a reporting limit and the amount lies below it"),
  sd: described(z.number().min(0).optional(), "Standard deviation of the measurement, in `unit`"),
  method: described(z.string().max(200).optional(), "How it was measured"),
  fraction: described(z.string().max(60).optional(), "Operational fraction: filtered, labile, total …"),
});
const quantity = z.union([z.number(), z.string().max(200), quantityObject]);
const pressure = z.union([z.number(), z.string().max(200), z.strictObject({ log10: described(z.number(), "log10 of the pressure in atm") }), quantityObject]);

const q = (description: string, examples: unknown[]) => described(quantity.optional(), description, examples);
const analyteFieldsOf = (set: ConstantsSet) => Object.fromEntries(set.analytes.map((each) => [each.key, q(
  `${each.description}; a bare number is ${each.defaultUnit}`, each.kind === "total" ? ["6.3 mg/L", "0.2 mmol/L"] : [`1 ${each.defaultUnit}`],
)])) as Record<AnalyteKey, ReturnType<typeof q>>;

/** Fields that a row and a case may both give; the case's wins. */
const conditionFields = {
  temperature: q("Temperature of the water, °C, 0 to 90", [8.4]),
  pH: q("pH: −log10 of the hydrogen-ion activity", [7.9]),
  pHTemperature: q("Temperature at which the pH was measured, °C; the facts settle the water there, closed on the way to its own", [20.5]),
  altitude: q("Altitude, m: a CO2 mole fraction in ppm is then of the air at that height", [310]),
  pressure: q("Air pressure, atm; wins over the altitude", ["101.3 kPa"]),
  pCO2: described(pressure.optional(), "CO2 pressure: atm when a bare number; ppm, uatm, atm, Pa, kPa, bar; or { \"log10\": −3.4 }", ["420 ppm"]),
};

const nullable = <T extends Record<string, z.ZodType>>(shape: T): { [K in keyof T]: z.ZodNullable<T[K]> } =>
  Object.fromEntries(Object.entries(shape).map(([key, each]) => [key, described(each.nullable(), z.globalRegistry.get(each)?.description ?? "")])) as never;

const solidSchema = z.strictObject({
  supply: described(z.union([z.enum(["excess", "may-form"]), z.number(), z.string().max(200), quantityObject]).optional(),
    "excess: the water reaches the saturation; may-form (default): forms when it would be passed; an amount: may dissolve until gone", ["excess", "may-form", "0.2 mmol/L"]),
  saturation: described(z.number().optional(), "Saturation index it is held at or may not pass; 0 where left out"),
  logK: described(z.number().optional(), "log K of dissolution at the water's temperature, in place of the constants set's"),
});

const organicSchema = z.strictObject({
  model: described(z.enum(["none", "oliver-1983", "hruska-2003", "driscoll-1994"]).optional(), "Published model of organic acidity"),
  pKa: described(z.array(z.number().min(-2).max(16)).min(1).max(6).optional(), "Own conditional pKa values, in order; needs sites"),
  sites: described(quantity.optional(), "Acid sites per mass of organic carbon; ueq/mg when a bare number", ["8.6 ueq/mg"]),
});

const axisSchema = z.strictObject({
  field: described(z.string().max(200), "What varies: pCO2, pH, temperature, an analyte, react/solids/calcite/saturation, constants/calcite/logK …",
    ["pCO2", "ANC", "pH", "temperature", "DIC", "react/gas", "react/solids/calcite/saturation", "close/SI", "organic/sites", "constants/calcite/logK"]),
  from: described(pressure.optional(), "First value", ["200 ppm"]),
  to: described(pressure.optional(), "Last value, included", ["20000 ppm"]),
  points: described(z.int().min(2).max(POINTS_PER_AXIS).optional(), "How many values, both ends included"),
  scale: described(z.enum(["linear", "log"]).optional(), "Spacing; linear where left out"),
  values: described(z.array(pressure).min(1).max(POINTS_PER_AXIS).optional(), "The values themselves, in place of from, to and points"),
  unit: described(z.string().max(60).optional(), "Unit of bare numbers, and the one the results show"),
});

/** The schemas over a constants set: the names they take are those of its solids, reactions, pairs and analytes. */
function makeSchemas(set: ConstantsSet) {
  const SOLID_NAMES = names(set.solids);
  const REACTION_NAMES = names([...set.species.filter((species) => species.logK !== null), ...set.solids]);
  const COMPLEX_NAMES = names(set.species.filter((species) => species.isComplex));
  const analyteFields = analyteFieldsOf(set);

  /** One analysed sample. null means not given. */
  const waterRowSchema = z.strictObject({
    id: described(z.union([z.string().max(200), z.number()]).nullable().optional(), "Name of the water in the results"),
    site: described(z.string().max(200).nullable().optional(), "Where it was taken"),
    date: described(z.string().max(40).nullable().optional(), "When it was taken, ISO 8601"),
    ...nullable(conditionFields),
    conductivity: described(q("Measured conductivity at 25 °C, µS/cm", [352]).nullable(), "Measured conductivity at 25 °C, µS/cm; compared, never used"),
    ...nullable(analyteFields),
  });

  const watersSchema = z.strictObject({
    set: described(z.string().max(80).optional(), "A stored sample set: set_… for its latest version, set_…@3 for the third", ["set_"]),
    units: described(z.record(z.string(), z.string().max(60)).optional(), "Default unit per column, for bare numbers"),
    belowLimit: described(z.enum(["half", "zero", "limit"]).optional(), "What “<x” counts as; half where left out"),
    missing: described(z.enum(["refuse", "zero"]).optional(), "An analyte not given: refuse (default) lets electroneutrality fail without Ca, Mg, Na, Cl or SO4; zero takes it for none"),
    rows: described(z.array(waterRowSchema).min(1).max(WATERS_PER_SPEC).optional(), "The waters themselves, in place of a stored set"),
  }).meta({ description: "Exactly one of set and rows" });

  const closeFact = z.union([
    described(z.enum(["charge", "ANC", "alkalinity", "pH", "pCO2", "DIC"]), "A fact by name"),
    z.strictObject({
      saturated: described(z.enum(SOLID_NAMES), "The measured totals are at this saturation with the solid, nothing transferred"),
      SI: described(z.number().min(-100).max(100).optional(), "Saturation index; 0 where left out"),
    }),
  ]);

  const reactSchema = z.strictObject({
    gas: described(pressure.optional(), "closed, open (held at the case's pCO2), or a pressure; open where close has pCO2, else closed", ["closed", "open", "420 ppm"]),
    solids: described(z.partialRecord(z.enum(SOLID_NAMES), solidSchema).optional(), "Solids that may take part, by name; others only have their SI reported"),
  });

  const caseSchema = z.strictObject({
    name: described(z.string().min(1).max(200), "Name of the case in the results"),
    like: described(z.string().max(200).optional(), "Start from that case, then override key by key"),
    close: described(z.array(closeFact).length(2).optional(), "The two facts that settle the sampled water", [["charge", "pCO2"], ["pH", "alkalinity"]]),
    activity: described(z.enum(["ideal", "guntelberg", "davies", "debye-huckel", "truesdell-jones"]).optional(), "Model of activity coefficients; davies where left out"),
    organic: described(organicSchema.optional(), "Organic acidity: a published model, or own pKa and sites; none where left out"),
    complexes: described(z.union([z.enum(["all", "none"]), z.array(z.enum(COMPLEX_NAMES))]).optional(), "Which pairs of a metal with a ligand take part; all where left out"),
    constants: described(z.partialRecord(z.enum(REACTION_NAMES), z.strictObject({ logK: described(z.number().min(-100).max(100), "log K of the reaction as printed, at the water's temperature") })).optional(), "Overrides of single constants"),
    react: described(reactSchema.optional(), "What the settled water then meets; absent: the result is the sampled water"),
    ...conditionFields,
    ...analyteFields,
  });

  const jobSpecSchema = z.strictObject({
    spec: described(z.literal(1), "Version of this format"),
    title: described(z.string().max(200).optional(), "What the job is called"),
    waters: watersSchema,
    cases: described(z.array(caseSchema).min(1).max(CASES_PER_SPEC), "Named sets of assumptions; every water runs through each"),
    extend: described(extendSchema.optional(), "Own species, solids and analytes, with the same standing as the built-in ones"),
    vary: described(z.array(axisSchema).max(AXES_PER_SPEC).optional(), "Axes of a grid, crossed with waters and cases"),
    report: described(z.array(z.string().max(200)).max(500).optional(), "Columns or column groups of the results; d:<column>/<input> is an exact derivative",
      [["pH", "ANC", "alkalinity", "pCO2", "SI"], ["species"], ["solids", "gas:CO2"], ["d:pH/Ca", "d:pH/pCO2", "bufferIntensity"]]),
    solver: described(z.strictObject({
      tolerance: described(z.number().min(1e-15).max(1e-9).optional(), "Largest relative error of a returned state; 1e-10 where left out, at most 1e-9"),
      maxIterations: described(z.int().min(1).max(10_000).optional(), "Iterations before the sure but slow path; 100 where left out"),
    }).optional(), "Settings of the solver"),
  }).meta({ title: "Tufa job spec, version 1" });
  return { waterRowSchema, caseSchema, jobSpecSchema };
}

export type SpecSchemas = ReturnType<typeof makeSchemas>;

const schemasOfSet = new WeakMap<ConstantsSet, SpecSchemas>();

export function schemasOf(set: ConstantsSet): SpecSchemas {
  let schemas = schemasOfSet.get(set);
  if (!schemas) { schemas = makeSchemas(set); schemasOfSet.set(set, schemas); }
  return schemas;
}

/** The schemas of the built-in set; a document that extends it is parsed by `schemasOf` its own. */
export const { waterRowSchema, caseSchema, jobSpecSchema } = schemasOf(BUILT_IN);

/** The document as accepted. */
export type JobSpec = z.infer<typeof jobSpecSchema>;

let built: object | undefined;

/** The job spec as JSON Schema (draft 7), for editors. Made once. */
export function jobSpecJsonSchema(): object {
  return (built ??= z.toJSONSchema(jobSpecSchema, { target: "draft-7", io: "input" }));
}
