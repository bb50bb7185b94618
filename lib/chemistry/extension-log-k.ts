/** log K over temperature as a spec writes it: named coefficients, or a value at 25 °C with or without an enthalpy. */
import type { LogKOverT, Source } from "@/lib/chemistry/data/types";
import { shorten } from "@/lib/chemistry/quantity";
import { pointerTo } from "@/lib/chemistry/spec-issues";
import { logKAt } from "@/lib/chemistry/temperature";
import type { Issue } from "@/lib/errors";
import { COEFFICIENTS, type OwnSolid, type OwnSpecies } from "@/lib/schemas/extend";

const KILOJOULES: Record<string, number> = { "kJ/mol": 1, "J/mol": 1e-3, "kcal/mol": 4.184, "cal/mol": 4.184e-3 };
/** A stated log K that the coefficients miss by more than this speaks of a slip in one of them. */
const AGREEMENT = 0.02;

/** kJ/mol of 5, "5 kJ/mol", "1.2 kcal/mol"; null where it is none. */
export function readEnthalpy(raw: number | string): number | null {
  if (typeof raw === "number") return Number.isFinite(raw) ? raw : null;
  const match = /^\s*([+\-−]?(?:\d+\.?\d*|\.\d+)(?:[eE][+\-]?\d+)?)\s*(\S*)\s*$/.exec(raw);
  const factor = match ? KILOJOULES[match[2] || "kJ/mol"] : undefined;
  return match && factor !== undefined ? Number(match[1].replace("−", "-")) * factor : null;
}

export function readLogK(own: OwnSpecies | OwnSolid, path: readonly string[]): { logK: LogKOverT & Source; issues: Issue[] } {
  const issues: Issue[] = [];
  const at = (key?: string) => pointerTo(key === undefined ? path : [...path, key]);
  const origin: Source = { source: own.source ?? "given in the job spec", fromMemory: false, ...(own.note === undefined ? {} : { note: own.note }) };
  const given = COEFFICIENTS.filter((name) => own[name] !== undefined);
  if (given.length > 0) {
    const form: LogKOverT = {
      form: "analytic", a: own.a ?? 0, bT: own.bT ?? 0, cOverT: own["c/T"] ?? 0, dLog10T: own["d·log10T"] ?? 0, eOverT2: own["e/T2"] ?? 0, logK25: 0,
    };
    form.logK25 = logKAt(form, 25);
    if (own.reactionEnthalpy !== undefined) issues.push({ pointer: at("reactionEnthalpy"), code: "contradiction", message: `Coefficients (${given.join(", ")}) and an enthalpy both say how log K varies with temperature.`, value: shorten(own.reactionEnthalpy), remedy: "Keep one of the two." });
    if (own.logK !== undefined && !(Math.abs(own.logK - form.logK25) <= AGREEMENT)) issues.push({ pointer: at("logK"), code: "contradiction", message: `The coefficients give log K ${form.logK25.toPrecision(5)} at 25 °C.`, value: String(own.logK), remedy: "Leave logK out, or correct the coefficients." });
    return { logK: { ...form, ...origin }, issues };
  }
  if (own.logK === undefined) issues.push({ pointer: at(), code: "missing", message: "There is no log K.", remedy: "Add \"logK\" at 25 °C, with \"reactionEnthalpy\" where it is known, or the coefficients a, bT, c/T, d·log10T, e/T2." });
  let enthalpy = 0;
  if (own.reactionEnthalpy !== undefined) {
    const read = readEnthalpy(own.reactionEnthalpy);
    if (read === null) issues.push({ pointer: at("reactionEnthalpy"), code: "unreadable-quantity", message: "The enthalpy cannot be read.", value: shorten(own.reactionEnthalpy), remedy: "Write \"5 kJ/mol\" or \"1.2 kcal/mol\"." });
    enthalpy = read ?? 0;
  }
  return { logK: { form: "vantHoff", logK25: own.logK ?? 0, reactionEnthalpy: enthalpy, ...origin }, issues };
}
