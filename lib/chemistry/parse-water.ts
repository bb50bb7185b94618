/**
 * A water the way it is dictated: "Ca 62 mg/L, alkalinity 2.71 meq/L, pH 7.9, 8.4 °C". Read into a row of a spec, each word with its
 * place, so that faults can be shown under it. Pure; the prompt calls it at each keystroke.
 */
import { ANALYTES } from "@/lib/chemistry/data";
import type { Analyte } from "@/lib/chemistry/data/types";
import { type Field, ROW_FIELDS } from "@/lib/chemistry/fields";
import { isProblem, rangeProblem, readQuantity } from "@/lib/chemistry/quantity";
import type { CarbonFact, ProtonFact } from "@/lib/chemistry/types";
import { spellUnit, splitUnit, unitScale, unitsOf } from "@/lib/chemistry/units";
import type { JobSpec } from "@/lib/schemas/job-spec";
import { nearestName } from "@/lib/schemas/nearest-name";

export interface LineToken {
  start: number;
  end: number;
  kind: "analyte" | "number" | "unit" | "separator" | "unknown";
  /** How it was taken, where that is not plain from the text: "sulphate" as SO4. */
  shown?: string;
  /** What to write instead. */
  suggestion?: string;
  problem?: string;
}

export interface ParsedLine {
  tokens: LineToken[];
  /** As in `waters.rows` of a spec; only what could be read. */
  row: Record<string, string | number>;
}

/** Dry air of the present decade; assumed where a water names nothing that settles its carbon. */
const AMBIENT_CO2 = "420 ppm";
const ASSUMED_CELSIUS = 25;

/** Names of what is no analyte. */
const CONDITION_NAMES: Record<string, string> = {
  ph: "pH", t: "temperature", temp: "temperature", temperature: "temperature", pco2: "pCO2", co2: "pCO2", altitude: "altitude", elevation: "altitude",
  pressure: "pressure", conductivity: "conductivity", ec: "conductivity", cond: "conductivity",
};
const FILLERS = new Set(["at", "of", "is", "and", "with", "=", ":", "a", "the"]);

interface Name { field: Field; basis: string | null; unit: string | null }

const findAnalyte = (lower: string): Analyte | undefined => ANALYTES.find((each) => each.key.toLowerCase() === lower || each.synonyms.includes(lower));

/** The field that a name means, with the basis some names imply: "NO3-N", "silica", "bicarbonate". */
function findName(text: string): Name | null {
  const lower = text.toLowerCase();
  const condition = Object.hasOwn(CONDITION_NAMES, lower) ? ROW_FIELDS.get(CONDITION_NAMES[lower]) : undefined;
  if (condition) return { field: condition, basis: null, unit: null };
  const dashed = /^(.+?)-(n|p|s|si|c)$/i.exec(text);
  const analyte = findAnalyte(lower) ?? (dashed ? findAnalyte(dashed[1].toLowerCase()) : undefined);
  if (!analyte) return null;
  const field = ROW_FIELDS.get(analyte.key)!;
  if (dashed && !findAnalyte(lower)) return { field, basis: dashed[2].charAt(0).toUpperCase() + dashed[2].slice(1).toLowerCase(), unit: null };
  const basis = analyte.namedBasis?.[lower] ?? null;
  return { field, basis, unit: basis ? "mg/L" : null };
}

/** Every name that may begin a part, for suggestions. */
const NAMES: readonly string[] = [...ANALYTES.flatMap((each) => [each.key, ...each.synonyms]), "pH", "temperature", "pCO2", "altitude", "pressure", "conductivity"];

interface Word { text: string; start: number; end: number }

/** Words, with commas, semicolons and line ends apart; a comma between two digits is a decimal sign, a number lets go of its unit. */
function words(line: string): Word[] {
  const found: Word[] = [];
  for (const match of line.matchAll(/[;\n]|,(?!\d)|(?<!\d),|(?:[^\s,;]|(?<=\d),(?=\d))+/g)) {
    const glued = /^([<≤]?[+\-−]?(?:\d+[.,]?\d*|[.,]\d+)(?:e[+-]?\d+)?)([a-zµμ°%].*)$/i.exec(match[0]);
    const named = /^([A-Za-z][\w+-]*)([=:])(.*)$/.exec(match[0]);
    const at = match.index;
    if (glued) found.push({ text: glued[1], start: at, end: at + glued[1].length }, { text: glued[2], start: at + glued[1].length, end: at + match[0].length });
    else if (named) {
      found.push({ text: named[1], start: at, end: at + named[1].length });
      const from = at + named[1].length + 1;
      if (named[3]) found.push({ text: named[3], start: from, end: from + named[3].length });
    } else found.push({ text: match[0], start: at, end: at + match[0].length });
  }
  return found;
}

const isBreak = (word: Word): boolean => /^[,;\n]$/.test(word.text);
const NUMBER = /^[<≤]?[+\-−]?(?:\d+[.,]?\d*|[.,]\d+)(?:e[+-]?\d+)?$/i;
const isNumber = (word: Word | undefined): boolean => word !== undefined && NUMBER.test(word.text);
const numberText = (text: string): string => text.replace(",", ".").replace("−", "-");

/** Reads a line. Never throws: what cannot be read is a token with a problem, and the rest is read all the same. */
export function parseWaterLine(line: string): ParsedLine {
  const tokens: LineToken[] = [];
  const row: Record<string, string | number> = {};
  let part: Word[] = [];
  const finish = (): void => { readPart(part, row, tokens); part = []; };
  for (const word of words(line)) {
    if (isBreak(word)) { finish(); tokens.push({ start: word.start, end: word.end, kind: "separator" }); } else part.push(word);
  }
  finish();
  tokens.sort((a, b) => a.start - b.start);
  return { tokens, row };
}

/** A part may hold several statements without commas: "Ca 62 mg/L Mg 6 mg/L pH 7.9". */
function readPart(part: readonly Word[], row: ParsedLine["row"], tokens: LineToken[]): void {
  let at = 0;
  while (at < part.length) at += readStatement(part.slice(at), row, tokens);
}

const mark = (word: Word, kind: LineToken["kind"], more: Partial<LineToken> = {}): LineToken => ({ start: word.start, end: word.end, kind, ...more });

/** @returns how many words were read. */
function readStatement(part: readonly Word[], row: ParsedLine["row"], tokens: LineToken[]): number {
  if (FILLERS.has(part[0].text.toLowerCase())) { tokens.push(mark(part[0], "separator")); return 1; }
  if (isNumber(part[0])) return readNameless(part, row, tokens);
  const named = longestName(part);
  if (!named) return skipUnknown(part, tokens);
  const span: Word = { text: "", start: part[0].start, end: part[named.used - 1].end };
  const { field } = named.name;
  const written = part.slice(0, named.used).map((word) => word.text).join(" ");
  tokens.push(mark(span, "analyte", written.toLowerCase() === field.key.toLowerCase() ? {} : { shown: field.key }));
  let at = named.used;
  while (part[at] && FILLERS.has(part[at].text.toLowerCase())) tokens.push(mark(part[at++], "separator"));
  if (!isNumber(part[at])) {
    const place = tokens.find((token) => token.start === span.start)!;
    place.problem = `A number follows ${field.key}${field.kind === "number" ? ": for example 7.9" : `: for example 12 ${unitsOf(field)[0]}`}.`;
    return at;
  }
  return at + readValue(part.slice(at), named.name, row, tokens);
}

function longestName(part: readonly Word[]): { name: Name; used: number } | null {
  for (let used = Math.min(4, part.length); used > 0; used--) {
    const name = findName(part.slice(0, used).map((word) => word.text).join(" "));
    if (name) return { name, used };
  }
  return null;
}

/** A word that is no name: it is marked, and what belongs to it is passed over, so that one slip makes one fault. */
function skipUnknown(part: readonly Word[], tokens: LineToken[]): number {
  const text = part[0].text;
  const suggestion = nearestName(text, NAMES) ?? undefined;
  tokens.push(mark(part[0], "unknown", { suggestion, problem: `“${text}” is neither an analyte nor a condition.` }));
  let at = 1;
  if (isNumber(part[at])) tokens.push(mark(part[at++], "number"));
  while (part[at] && !isNumber(part[at]) && !longestName(part.slice(at))) tokens.push(mark(part[at++], "unit"));
  return at;
}

/** "8.4 °C" by itself is the temperature; any other number without a name is asked about. */
function readNameless(part: readonly Word[], row: ParsedLine["row"], tokens: LineToken[]): number {
  if (part[1] && /^(°|°c|degc|c|°C)$/i.test(part[1].text)) return readValue(part, { field: ROW_FIELDS.get("temperature")!, basis: null, unit: null }, row, tokens);
  const after = part[1] ? longestName(part.slice(2)) : null;
  // "62 mg/L Ca": the name may come behind.
  if (after && part.length === 2 + after.used) {
    const read = readValue(part, after.name, row, tokens);
    if (read === 2) tokens.push(mark({ text: "", start: part[2].start, end: part[part.length - 1].end }, "analyte"));
    return Math.max(read, part.length);
  }
  tokens.push(mark(part[0], "unknown", { problem: "A number without a name: what was measured? For example Ca 62 mg/L, or 8.4 °C." }));
  return part[1] && !isNumber(part[1]) && !longestName(part.slice(1)) ? (tokens.push(mark(part[1], "unit")), 2) : 1;
}

/** Number, unit and basis. @returns how many words they are. */
function readValue(part: readonly Word[], name: Name, row: ParsedLine["row"], tokens: LineToken[]): number {
  const { field } = name;
  const number = part[0];
  const { used, unit, as } = unitBehind(part.slice(1), field);
  const span: Word | null = used > 0 ? { text: "", start: part[1].start, end: part[used].end } : null;
  tokens.push(mark(number, "number"));
  if (span) tokens.push(mark(span, "unit"));
  const last = tokens[tokens.length - 1];
  const spelled = unit ?? name.unit ?? (name.basis ? field.defaultUnit : "");
  const basis = as ?? name.basis;
  const text = [numberText(number.text), spelled, basis && !/eq\//.test(spelled) ? `as ${basis}` : ""].filter(Boolean).join(" ");
  const read = readQuantity(text, field);
  if (isProblem(read)) {
    const options = unitsOf(field);
    last.problem = `${read.message} ${read.remedy}`;
    if (span) last.suggestion = nearestName(spelled, options) ?? options[0];
    return 1 + used;
  }
  const range = rangeProblem(read.base, field);
  if (range) tokens.find((token) => token.start === number.start)!.problem = range.message;
  else if (Object.hasOwn(row, field.key)) tokens.find((token) => token.start === number.start)!.problem = `${field.key} is given twice.`;
  else row[field.key] = field.kind === "number" ? read.value : field.kind === "temperature" ? read.base : spelled === "" ? `${numberText(number.text)} ${field.defaultUnit}` : text;
  return 1 + used;
}

/** The unit behind a number, with "as N" or a bare formula for a basis. One word that is no name counts as a unit meant. */
function unitBehind(rest: readonly Word[], field: Field): { used: number; unit: string | null; as: string | null } {
  if (!rest[0]) return { used: 0, unit: null, as: null };
  for (let count = Math.min(4, rest.length); count > 0; count--) {
    const { unit, as } = splitUnit(rest.slice(0, count).map((word) => word.text).join(" "));
    if (unit !== "" && !("message" in unitScale(field, unit, as))) return { used: count, unit, as };
  }
  // Words such as "mg/L" that this field does not take are still its unit; a name begins the next statement.
  if (isNumber(rest[0]) || FILLERS.has(rest[0].text.toLowerCase()) || longestName(rest)) return { used: 0, unit: null, as: null };
  const hasBasis = rest[1]?.text.toLowerCase() === "as" && rest[2];
  return { used: hasBasis ? 3 : 1, unit: spellUnit(rest[0].text), as: hasBasis ? rest[2].text : null };
}

type FactPair = readonly [ProtonFact | CarbonFact, ProtonFact | CarbonFact];

/** The facts a typed water is settled by: measured ones first, the present air where nothing tells its carbon. */
function factsOf(row: ParsedLine["row"]): { facts: FactPair; isAmbient: boolean } {
  const has = (key: string): boolean => Object.hasOwn(row, key);
  const balance = has("alkalinity") ? "alkalinity" : has("ANC") ? "ANC" : null;
  const carbon = has("DIC") ? "DIC" : has("pCO2") ? "pCO2" : null;
  const hasIons = ANALYTES.some(({ key, strongCharge }) => strongCharge !== 0 && has(key));
  if (has("pH")) {
    if (balance) return { facts: ["pH", balance], isAmbient: false };
    if (carbon) return { facts: ["pH", carbon], isAmbient: false };
    return hasIons ? { facts: ["pH", "charge"], isAmbient: false } : { facts: ["pH", "pCO2"], isAmbient: true };
  }
  if (!balance && has("DIC") && has("pCO2") && !hasIons) return { facts: ["DIC", "pCO2"], isAmbient: false };
  return { facts: [balance ?? "charge", carbon ?? "pCO2"], isAmbient: carbon === null };
}

/** How the facts are said: they name the case, so that an assumption is read with every answer. */
function caseName(facts: FactPair, isAmbient: boolean, isWarm: boolean): string {
  const words = facts.map((fact) => (fact === "charge" ? "charge balance" : fact === "pCO2" && isAmbient ? `open air (${AMBIENT_CO2})` : fact));
  return `by ${words.join(" and ")}${isWarm ? `, at ${ASSUMED_CELSIUS} °C for want of a temperature` : ""}`;
}

/** The spec that solves a typed water. What it assumes (open air, 25 °C, ions not named are none) stands in the case's name and keys. */
export function specForLine(line: ParsedLine): JobSpec {
  const { facts, isAmbient } = factsOf(line.row);
  const isWarm = line.row.temperature === undefined;
  return {
    spec: 1,
    waters: { rows: [{ id: "typed water", ...line.row }], missing: "zero" },
    cases: [{
      name: caseName(facts, isAmbient, isWarm), close: [...facts] as JobSpec["cases"][number]["close"], activity: "davies",
      ...(isAmbient ? { pCO2: AMBIENT_CO2 } : {}), ...(isWarm ? { temperature: ASSUMED_CELSIUS } : {}),
    }],
  };
}
