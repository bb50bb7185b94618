/** The values of an axis, as shown and in base units. */
import { BUILT_IN, type ConstantsSet } from "@/lib/chemistry/data/constants-set";
import { axisField, type Field } from "@/lib/chemistry/fields";
import { isProblem, type Quantity, type QuantityProblem, readQuantity } from "@/lib/chemistry/quantity";
import type { ResolvedAxis } from "@/lib/chemistry/types";
import { splitUnit, unitScale, type UnitScale } from "@/lib/chemistry/units";
import type { JobSpec } from "@/lib/schemas/job-spec";

export type SpecAxis = NonNullable<JobSpec["vary"]>[number];

export const pointCount = (axis: SpecAxis): number => axis.values?.length ?? axis.points ?? 0;

export interface AxisProblem extends QuantityProblem { /** Below the axis: "from", "values/3", … */ at: string }

/** Unit of the results: the axis' own, else that of its first value with one, else the column's. */
function shownUnit(axis: SpecAxis, field: Field, units: Readonly<Record<string, string>>): string {
  if (axis.unit !== undefined) return axis.unit;
  for (const raw of axis.values ?? [axis.from, axis.to]) {
    const read = raw === undefined ? null : readQuantity(raw, field, "");
    if (read && !isProblem(read) && read.unit !== "") return read.as ? `${read.unit} as ${read.as}` : read.unit;
  }
  return Object.hasOwn(units, field.key) ? units[field.key] : field.defaultUnit;
}

/**
 * Reads an axis. Values are spaced evenly in the shown unit (or in its logarithm), both ends exactly as written.
 * @returns the axis, or every value that cannot be read.
 */
export function readAxis(axis: SpecAxis, units: Readonly<Record<string, string>>, set: ConstantsSet = BUILT_IN): ResolvedAxis | AxisProblem[] {
  const field = axisField(axis.field, set);
  if (!field) return [{ at: "field", code: "unknown-field", message: `Nothing is called “${axis.field}” that could vary.`, remedy: "" }];
  const unit = shownUnit(axis, field, units);
  const split = splitUnit(unit);
  const scale = unitScale(field, split.unit, split.as);
  if ("message" in scale) return [{ at: axis.unit !== undefined ? "unit" : axis.values ? "values/0" : "from", code: "unknown-unit", ...scale }];
  const raws = axis.values ? axis.values.map((raw, index) => ({ raw, at: `values/${index}` })) : [{ raw: axis.from, at: "from" }, { raw: axis.to, at: "to" }];
  const problems: AxisProblem[] = [];
  const read: Quantity[] = [];
  for (const { raw, at } of raws) {
    const each = readQuantity(raw, field, unit);
    if (isProblem(each)) problems.push({ at, ...each });
    else if (each.isBelow) problems.push({ at, code: "unreadable-quantity", message: "An axis cannot hold values below a limit.", remedy: "Give plain numbers." });
    else if (each.isDryFraction !== scale.isDryFraction) problems.push({ at, code: "mixed-units", message: "An axis cannot mix mole fractions (ppm) and pressures.", remedy: "Write all of its values in one unit." });
    else read.push(each);
  }
  if (problems.length > 0) return problems;
  const shownOf = (each: Quantity): number => (each.unit === split.unit && each.as === split.as ? each.value : (each.base - scale.offset) / scale.factor);
  const shown = axis.values ? Float64Array.from(read, shownOf) : spread(shownOf(read[0]), shownOf(read[1]), axis.points ?? 2, axis.scale === "log");
  return { field: axis.field, unit: field.kind === "number" ? "" : unit.replace(/^u(?=g|mol|eq|S|atm)/, "µ"), shown, base: shown.map((value) => toBase(value, scale)), isDryFraction: scale.isDryFraction };
}

const toBase = (value: number, scale: UnitScale): number => value * scale.factor + scale.offset;

function spread(from: number, to: number, points: number, isLog: boolean): Float64Array {
  return Float64Array.from({ length: points }, (_, k) => {
    if (k === 0) return from;
    if (k === points - 1) return to;
    const share = k / (points - 1);
    return isLog ? from * (to / from) ** share : from + (to - from) * share;
  });
}
