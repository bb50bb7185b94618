/** "range pCO2 200 to 20000 ppm 41 points log": reading the words and turning an entry's spec into a grid. */
import { ANALYTES, SOLIDS } from "./named-constants";
import type { JobSpec } from "@/lib/schemas/job-spec";
import { AMBIENT_CO2, type Answered } from "./case-changes";
import { closeOver } from "./close-facts";
import type { Completion, Mark } from "./command";
import type { LineProblem } from "./entry";
import { joined, type Word } from "./words";
import { nearestName } from "@/lib/schemas/nearest-name";

export interface RangeRequest {
  field: string;
  from: number;
  to: number;
  unit: string;
  points: number;
  scale: "log" | "linear";
}

/** Grid points one request may ask for: the limit of rows of POST /solve. */
export const MOST_POINTS = 500;
export const USUAL_POINTS = 41;

const PLAIN_FIELDS = ["pCO2", "temperature", "pH", "ANC", "alkalinity", "DIC", "DOC"] as const;
/** Fields of one word that a range may run over; a solid's name stands for the saturation it is held at. */
export const RANGE_FIELDS: readonly string[] = [...new Set([...PLAIN_FIELDS, ...ANALYTES.map((each) => each.key)])];

const FIELD_UNITS: Record<string, string> = { pCO2: "ppm", temperature: "°C", pH: "", ANC: "µeq/L", alkalinity: "meq/L", DIC: "mmol/L", DOC: "mg/L" };
const unitsOf = (field: string): string[] =>
  field === "pCO2" ? ["ppm", "uatm", "atm", "kPa"] : field === "temperature" ? ["°C"] : field === "pH" || field.includes("/") ? []
    : field === "ANC" || field === "alkalinity" ? ["µeq/L", "meq/L"] : ["mg/L", "mmol/L", "µmol/L"];

const NUMBER = /^[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d+)?$/i;

function fieldOf(text: string): string | null {
  const lower = text.toLowerCase();
  if (lower === "co2") return "pCO2";
  if (lower === "t" || lower === "temp") return "temperature";
  const plain = RANGE_FIELDS.find((name) => name === text) ?? RANGE_FIELDS.find((name) => name.toLowerCase() === lower);
  if (plain) return plain;
  const solid = SOLIDS.find((each) => each.name.toLowerCase() === lower);
  if (solid) return `react/solids/${solid.name}/saturation`;
  return ANALYTES.find((each) => each.synonyms.includes(lower))?.key ?? null;
}

export interface ReadRange { range: RangeRequest | null; problems: LineProblem[]; marks: Mark[] }

/** Reads `<field> <from> [unit] to <to> [unit] [N points] [log|linear]`. */
export function readRange(words: readonly Word[]): ReadRange {
  const fail = (place: { start: number; end: number }, message: string, suggestion?: string): ReadRange =>
    ({ range: null, problems: [{ start: place.start, end: place.end, message, suggestion }], marks: [] });
  const given = words.filter((word) => !/^(,|over|from|in|with)$/i.test(word.text));
  const last = words[words.length - 1] ?? { text: "", start: 0, end: 0 };
  if (given.length === 0) return fail(last, `Which field? For example: range pCO2 200 to 20000 ppm. Fields: ${PLAIN_FIELDS.join(", ")}, any analyte, any solid (its saturation).`);
  const field = fieldOf(given[0].text);
  if (!field) return fail(given[0], `“${given[0].text}” is not a field that can be varied.`, nearestName(given[0].text, [...RANGE_FIELDS, ...SOLIDS.map((each) => each.name)]) ?? undefined);
  const marks: Mark[] = [{ start: given[0].start, end: given[0].end, kind: "name", shown: field.includes("/") ? "saturation index" : undefined }];
  const rest = given.slice(1);
  const ends = readEnds(rest, field);
  if ("problem" in ends) return { range: null, problems: [{ ...placeOf(ends.at, last), message: ends.problem, suggestion: ends.suggestion }], marks };
  const options = readOptions(rest.slice(ends.used), ends.from, ends.to, field);
  if ("problem" in options) return { range: null, problems: [{ ...placeOf(options.at, last), message: options.problem, suggestion: options.suggestion }], marks };
  const place = joined(rest.slice(0, ends.used));
  marks.push({ start: place.start, end: place.end, kind: "value", shown: `${options.points} points, ${options.scale}` });
  return { range: { field, from: ends.from, to: ends.to, unit: ends.unit, ...options }, problems: [], marks };
}

interface Fault { problem: string; at: Word | undefined; suggestion?: string }

const placeOf = (word: Word | undefined, last: Word): { start: number; end: number } => ({ start: (word ?? last).start, end: (word ?? last).end });

/** `200 [ppm] to 20000 [ppm]`; `..`, `-` and `…` between the numbers do as well. */
function readEnds(words: readonly Word[], field: string): { from: number; to: number; unit: string; used: number } | Fault {
  let at = 0;
  const units: string[] = [];
  const readOne = (): number | null => {
    const text = words[at]?.text.replace(/^−/, "-");
    if (text === undefined || !NUMBER.test(text)) return null;
    at++;
    const unit = words[at]?.text;
    if (unit !== undefined && !/^(to|\.\.|…|-|–|log|linear|points?)$/i.test(unit) && !NUMBER.test(unit)) {
      units.push(unit);
      at++;
    }
    return Number(text);
  };
  const unitWord = (): Word | undefined => words[at - 1];
  const from = readOne();
  if (from === null) return { problem: "Where does it start? A number follows, then “to” and another.", at: words[at] };
  if (words[at] && /^(to|\.\.|…|-|–)$/i.test(words[at].text)) at++;
  else return { problem: "“to” and the other end follow.", at: words[at] ?? words[at - 1] };
  const to = readOne();
  if (to === null) return { problem: "Where does it end? A number follows.", at: words[at] ?? words[at - 1] };
  if (units.length === 2 && units[0] !== units[1]) return { problem: `Both ends in one unit, please: ${units[0]} or ${units[1]}.`, at: unitWord(), suggestion: units[0] };
  const unit = units[0] ?? FIELD_UNITS[field] ?? (field.includes("/") ? "" : "mg/L");
  const known = unitsOf(field);
  if (field === "pCO2" && ![...known, "µatm", "μatm", "Pa", "bar"].includes(unit)) return { problem: `“${unit}” is not a unit of pressure.`, at: words.find((word) => word.text === unit), suggestion: nearestName(unit, known) ?? "ppm" };
  if (from === to) return { problem: "Both ends are the same.", at: words[at - 1] };
  return { from, to, unit, used: at };
}

function readOptions(words: readonly Word[], from: number, to: number, field: string): { points: number; scale: "log" | "linear" } | Fault {
  let points = USUAL_POINTS;
  let scale: "log" | "linear" = field === "pCO2" && from > 0 && to > 0 ? "log" : "linear";
  for (const word of words) {
    if (/^points?$/i.test(word.text)) continue;
    if (/^log$/i.test(word.text)) scale = "log";
    else if (/^lin(ear)?$/i.test(word.text)) scale = "linear";
    else if (/^\d+$/.test(word.text)) points = Number(word.text);
    else return { problem: `“${word.text}” does not belong to a range; a number of points, log or linear may follow.`, at: word, suggestion: nearestName(word.text, ["log", "linear", "points"]) ?? undefined };
  }
  if (points < 2 || points > MOST_POINTS) return { problem: `Between 2 and ${MOST_POINTS} points; more belong in a job (edit, then submit).`, at: words.find((word) => /^\d+$/.test(word.text)) };
  if (scale === "log" && (from <= 0 || to <= 0)) return { problem: "A log scale needs both ends above zero.", at: words.find((word) => /^log$/i.test(word.text)), suggestion: "linear" };
  return { points, scale };
}

/** Columns a grid entry asks for: everything that makes a curve, without the long list of species. */
export const GRID_REPORT = ["pH", "ANC", "alkalinity", "DIC", "pCO2", "ionicStrength", "balanceError", "SI", "solids"];

/**
 * The entry's spec over a range. The varied field becomes one of the two facts where it can be one; a fact that this
 * sets free is held at what the entry came out with, so that the curve runs through the entry's own point.
 */
export function specForRange(spec: JobSpec, range: RangeRequest, answered: Answered): JobSpec {
  const copy = structuredClone(spec);
  const each = copy.cases[0];
  const field = range.field;
  if (field === "pCO2" || field === "ANC" || field === "alkalinity" || field === "pH" || field === "DIC") {
    const before = JSON.stringify(each.close);
    // With the pH held as well, a varied capacity would only move the carbon: the curve is drawn at the answer's own CO2.
    if ((field === "ANC" || field === "alkalinity") && each.close?.includes("pH")) each.close = [field, "pCO2"];
    else closeOver(each, field);
    if (JSON.stringify(each.close) !== before) holdAnswered(each, answered);
    if (field === "pCO2") {
      delete each.pCO2;
      if (each.react && each.react.gas !== "closed") each.react.gas = "open";
    }
  }
  if (field.startsWith("react/solids/")) {
    const name = field.split("/")[2];
    const react = (each.react ??= {});
    react.solids = { ...react.solids, [name]: { supply: "excess", saturation: 0 } };
  }
  copy.vary = [{
    field, from: withUnit(range.from, range.unit), to: withUnit(range.to, range.unit), points: range.points, scale: range.scale,
  }] as JobSpec["vary"];
  copy.report = GRID_REPORT as JobSpec["report"];
  return copy;
}

const withUnit = (value: number, unit: string): number | string => (unit === "" || unit === "°C" ? value : `${value} ${unit}`);

/** Gives newly needed facts the values of the entry's own answer; ambient air where it has none. */
function holdAnswered(each: JobSpec["cases"][number], answered: Answered): void {
  const close = each.close as readonly unknown[] | undefined;
  if (close?.includes("pCO2") && each.pCO2 === undefined) {
    each.pCO2 = typeof answered.pCO2 === "number" ? Number(answered.pCO2.toPrecision(6)) : AMBIENT_CO2;
  }
  if (close?.includes("DIC") && each.DIC === undefined && typeof answered.DIC === "number") {
    each.DIC = `${Number((answered.DIC * 1000).toPrecision(8))} mmol/L`;
  }
}

/** The range a pH–ANC chart of one water runs over: a little below zero to twice its ANC, in µeq/L. */
export function usualAncRange(answered: Answered): RangeRequest {
  const anc = typeof answered.ANC === "number" ? answered.ANC : 1000;
  const top = Math.max(200, Math.ceil((Math.abs(anc) * 2) / 100) * 100);
  return { field: "ANC", from: -Math.max(100, Math.round(top / 10 / 50) * 50), to: top, unit: "µeq/L", points: 81, scale: "linear" };
}

/** What may stand at the caret of a range. */
export function completeRange(before: readonly Word[], partial: string): Completion[] {
  const words = before.filter((word) => !/^(,|over|from|in|with)$/i.test(word.text));
  const starting = (all: Completion[]): Completion[] => all.filter((each) => each.insert.toLowerCase().startsWith(partial.toLowerCase()));
  if (words.length === 0) {
    return starting([
      ...RANGE_FIELDS.map((insert) => ({ insert, detail: FIELD_UNITS[insert] || (insert === "pH" ? "" : "amount") })),
      ...SOLIDS.map((solid) => ({ insert: solid.name, detail: "the SI it is held at" })),
    ]);
  }
  const field = fieldOf(words[0].text) ?? "";
  const numbers = words.slice(1).filter((word) => NUMBER.test(word.text)).length;
  const last = words[words.length - 1].text;
  if (numbers === 0) return [];
  if (numbers === 1) return starting([{ insert: "to", detail: "then the other end" }, ...unitsOf(field).map((insert) => ({ insert, detail: "unit" }))]);
  if (numbers === 2 && NUMBER.test(last)) return starting([...unitsOf(field).map((insert) => ({ insert, detail: "unit" })), { insert: "log", detail: "scale" }, { insert: "linear", detail: "scale" }]);
  return starting([{ insert: "log", detail: "scale" }, { insert: "linear", detail: "scale" }, { insert: "points", detail: "after a number" }]);
}
