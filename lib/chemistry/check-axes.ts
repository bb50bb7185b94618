/** What no schema can say about axes: fields that exist and matter, values that can be read and are in range. */
import { type AxisProblem, readAxis, type SpecAxis } from "@/lib/chemistry/axis-values";
import { BUILT_IN, type ConstantsSet } from "@/lib/chemistry/data/constants-set";
import { effectiveCases, factName, type SpecCase } from "@/lib/chemistry/effective-cases";
import { axisField, axisNames } from "@/lib/chemistry/fields";
import { rangeProblem, shorten } from "@/lib/chemistry/quantity";
import type { Issue } from "@/lib/errors";
import { nearestName } from "@/lib/schemas/nearest-name";

type Units = Readonly<Record<string, string>>;

/** Every fault of the axes. */
export function checkAxes(axes: readonly SpecAxis[], cases: readonly SpecCase[], units: Units, set: ConstantsSet = BUILT_IN): Issue[] {
  const merged = effectiveCases(cases);
  return axes.flatMap((axis, index) => {
    const pointer = `/vary/${index}`;
    const fieldIssue = fieldProblem(axis, merged, set) ?? repeatProblem(axes, index);
    const shape = shapeIssues(axis, pointer);
    if (fieldIssue) return [{ pointer: `${pointer}/field`, value: shorten(axis.field), ...fieldIssue }, ...shape];
    return shape.length > 0 ? shape : valueIssues(axis, pointer, units, set);
  });
}

function fieldProblem({ field }: SpecAxis, cases: readonly SpecCase[], set: ConstantsSet): Pick<Issue, "code" | "message" | "remedy"> | null {
  if (!axisNames(set).includes(field)) {
    const nearest = nearestName(field, axisNames(set));
    return { code: "unknown-field", message: `Nothing called “${shorten(field)}” can vary.`, remedy: nearest ? `Did you mean “${nearest}”?` : `For example ${["pCO2", "ANC", "pH", "temperature", ...set.analytes.slice(0, 3).map(({ key }) => key), "react/solids/calcite/saturation"].join(", ")}.` };
  }
  const idle = idleReason(field, cases);
  return idle ? { code: "idle-axis", message: `Varying ${field} would change nothing: ${idle}.`, remedy: "Take the axis out, or let a case use it." } : null;
}

function repeatProblem(axes: readonly SpecAxis[], index: number): Pick<Issue, "code" | "message" | "remedy"> | null {
  const { field } = axes[index];
  return axes.findIndex((each) => each.field === field) < index ? { code: "duplicate", message: `Two axes vary ${field}.`, remedy: "Take one of them out." } : null;
}

/** Why no case would notice the axis, or null where one does. */
function idleReason(field: string, cases: readonly SpecCase[]): string | null {
  const closesOn = (fact: string): boolean => cases.some((each) => each.close?.some((one) => factName(one) === fact));
  // Without a word on the gas, a reaction is open only where the case closes on pCO2 already.
  const hasGas = cases.some((each) => each.react?.gas === "open");
  if (field === "pCO2") return closesOn("pCO2") || hasGas ? null : "no case closes on pCO2 or is open to it";
  if (["pH", "ANC", "alkalinity", "DIC"].includes(field)) return closesOn(field) ? null : `no case closes on ${field}`;
  if (field === "pHTemperature") return closesOn("pH") ? null : "no case closes on pH";
  if (field === "close/SI") return closesOn("saturated") ? null : "no case closes on a saturation";
  if (field === "react/gas") return cases.some((each) => each.react) ? null : "no case reacts";
  if (field === "organic/sites" || field === "DOC") return cases.some((each) => each.organic && each.organic.model !== "none") ? null : "no case has an organic model";
  const solid = /^react\/solids\/(.+)\/\w+$/.exec(field)?.[1];
  if (solid) return cases.some((each) => each.react?.solids && Object.hasOwn(each.react.solids, solid)) ? null : `no case lets ${solid} react`;
  return null;
}

function shapeIssues(axis: SpecAxis, pointer: string): Issue[] {
  const hasEnds = axis.from !== undefined || axis.to !== undefined || axis.points !== undefined;
  if (axis.values && (hasEnds || axis.scale !== undefined)) return [{ pointer, code: "contradiction", message: "An axis has either values, or from, to and points.", remedy: "Take one of the two out." }];
  if (axis.values) return [];
  const lacking = (["from", "to", "points"] as const).filter((key) => axis[key] === undefined);
  if (lacking.length === 3) return [{ pointer, code: "missing", message: "The axis has no values.", remedy: "Add \"values\": […], or \"from\", \"to\" and \"points\"." }];
  return lacking.map((key) => ({ pointer: `${pointer}/${key}`, code: "missing", message: `“${key}” is missing.`, remedy: "An axis needs from, to and points." }));
}

/** Faults of single values shown of one axis; more would say the same. */
const MOST_VALUES = 20;

function valueIssues(axis: SpecAxis, pointer: string, units: Units, set: ConstantsSet): Issue[] {
  const read = readAxis(axis, units, set);
  const valueOf = (at: string): unknown => (at.startsWith("values/") ? axis.values?.[Number(at.slice(7))] : axis[at as "from"]);
  const issue = ({ at, ...problem }: AxisProblem): Issue => ({ pointer: `${pointer}/${at}`, ...problem, value: shorten(valueOf(at)) });
  if (Array.isArray(read)) return read.slice(0, MOST_VALUES).map(issue);
  if (axis.scale === "log" && !(read.shown[0] > 0 && read.shown[read.shown.length - 1] > 0)) {
    return [{ pointer, code: "out-of-range", message: "A logarithmic axis needs both ends above zero.", remedy: "Raise the lower end above zero, or let the scale be linear." }];
  }
  const field = axisField(axis.field, set)!;
  const places = axis.values ? [...read.base.keys()].map((k) => ({ k, at: `values/${k}` })) : [{ k: 0, at: "from" }, { k: read.base.length - 1, at: "to" }];
  return places.flatMap(({ k, at }) => {
    const problem = rangeProblem(read.base[k], field);
    return problem ? [issue({ at, ...problem })] : [];
  }).slice(0, MOST_VALUES);
}
