/** Columns of derivatives: "d:<column>/<input>" and bufferIntensity. What they are called, counted in and said to be. */
import { BUILT_IN, type ConstantsSet } from "@/lib/chemistry/data/constants-set";
import { axisField, type Field } from "@/lib/chemistry/fields";
import { splitUnit, unitScale, type UnitScale } from "@/lib/chemistry/units";
import type { ColumnDescriptor } from "@/lib/schemas/columns";

export const BUFFER_INTENSITY = "bufferIntensity";
const PREFIX = "d:";

export const isSensitivity = (name: string): boolean => name === BUFFER_INTENSITY || name.startsWith(PREFIX);

/** No column's name holds a slash, so the first one ends it; an input's may ("constants/calcite/logK"). */
export function parseDerivative(name: string): { column: string; input: string } | null {
  const slash = name.indexOf("/");
  return name.startsWith(PREFIX) && slash > 0 ? { column: name.slice(PREFIX.length, slash), input: name.slice(slash + 1) } : null;
}

type Units = Readonly<Record<string, string>>;

export interface InputUnit { field: Field; unit: string; scale: UnitScale }

/** What an input is counted in: the spec's default unit of its column, else the usual one. */
export function inputUnit(input: string, units: Units, set: ConstantsSet = BUILT_IN): InputUnit {
  const field = axisField(input, set);
  if (!field) throw new Error(`report: nothing is called ${input}`);
  const unit = Object.hasOwn(units, field.key) ? units[field.key] : field.defaultUnit;
  const split = splitUnit(unit);
  const scale = unitScale(field, split.unit, split.as);
  if ("message" in scale) throw new Error(`report: ${input}: ${scale.message}`);
  return { field, unit, scale };
}

/** Inputs without a unit are still said: a slope per pH unit is not one per unit of log K. */
const UNITLESS: Record<string, string> = { pH: "pH unit", logK: "unit of log K", saturation: "unit of SI" };

/** @param of descriptor of the column that is derived. */
export function derivativeColumn(name: string, of: ColumnDescriptor, units: Units, set: ConstantsSet = BUILT_IN): ColumnDescriptor {
  const { input } = parseDerivative(name)!;
  const { field, unit } = inputUnit(input, units, set);
  const per = unit || UNITLESS[field.key] || "unit";
  return {
    name, type: "number", unit: `${of.unit ? `${of.unit} ` : ""}per ${per}`, basis: of.basis, group: "main",
    description: `Exact derivative of ${of.name}${of.unit ? ` (${of.unit})` : ""} with respect to ${input} (${per}) at the solution; everything else that was given stays as it is`,
  };
}
