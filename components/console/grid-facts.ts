/** A range's answer as points and as what to call them. */
import type { EntryBody } from "@/lib/commands/entry";

export type Grid = Extract<EntryBody, { kind: "grid" }>;

export interface Curve { label: string; points: { x: number; y: number }[] }

/** Value columns a curve can be drawn of, as they stand in the answer. */
export const curveColumns = (body: Grid): string[] =>
  body.response.columns.filter((column) => column.type === "number" && column.group !== "row" && column.group !== "axis"
    && body.response.rows.some((row) => typeof row[column.name] === "number")).map((column) => column.name);

/** The column of the varied field; it has another name where the field is reported as well. */
export const axisColumn = (body: Grid): string => body.response.columns.find((column) => column.group === "axis")?.name ?? body.field;

export const unitOf = (body: Grid, name: string): string => body.response.columns.find((column) => column.name === name)?.unit ?? "";

/** One curve for each case, failed points left out. */
export function curvesOf(body: Grid, y: string): Curve[] {
  const curves = new Map<string, Curve>();
  const axis = axisColumn(body);
  for (const row of body.response.rows) {
    const x = row[axis];
    const value = row[y];
    if (typeof x !== "number" || typeof value !== "number") continue;
    const label = String(row.case ?? "");
    const curve = curves.get(label) ?? { label, points: [] };
    curve.points.push({ x, y: value });
    curves.set(label, curve);
  }
  return [...curves.values()];
}

/** True where the spec asked for a log scale of the field. */
export const isLog = (body: Grid): boolean => (body.spec.vary?.[0] as { scale?: string } | undefined)?.scale === "log";

const FIELD_WORDS: Record<string, string> = { temperature: "temperature" };
/** "react/solids/calcite/saturation" said as "SI held for calcite". */
export function fieldLabel(field: string): string {
  const solid = /^react\/solids\/(.+)\/saturation$/.exec(field);
  return solid ? `index held for ${solid[1]}` : FIELD_WORDS[field] ?? field;
}

/** What one unit of a reported column is in the unit an axis is shown in; null where they do not compare. */
export function unitFactor(from: string, to: string): number | null {
  if (from === to) return 1;
  const factors: Record<string, number> = {
    "atm>ppm": 1e6, "atm>uatm": 1e6, "atm>µatm": 1e6, "atm>kPa": 101.325, "atm>Pa": 101_325, "atm>bar": 1.01325,
    "µeq/L>meq/L": 1e-3, "µeq/L>ueq/L": 1, "mol/kg>mmol/L": 1e3, "mol/kg>µmol/L": 1e6,
  };
  return factors[`${from}>${to}`] ?? null;
}
