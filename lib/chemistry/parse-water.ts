/**
 * A water the way it is dictated: "Ca 62 mg/L, alkalinity 2.71 meq/L, pH 7.9, 8.4 °C". Read into a row of a spec, each word with its
 * place, so that faults can be shown under it. Pure; the prompt calls it at each keystroke.
 */
import { ANALYTES } from "@/lib/chemistry/data";
import { type Field, ROW_FIELDS } from "@/lib/chemistry/fields";
import { findName, type Name, NAMES } from "@/lib/chemistry/line-names";
import { isBreak, isNumber, lineWords, type Word } from "@/lib/chemistry/line-words";
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

const FILLERS = new Set(["at", "of", "is", "and", "with", "=", ":", "a", "the"]);

const numberText = (text: string): string => text.replace(",", ".").replace("−", "-");

/** Reads a line. Never throws: what cannot be read is a token with a problem, and the rest is read all the same. */
export function parseWaterLine(line: string): ParsedLine {
  const tokens: LineToken[] = [];
  const row: Record<string, string | number> = {};
  let part: Word[] = [];
  const finish = (): void => { readPart(part, row, tokens); part = []; };
  for (const word of lineWords(line)) {
    if (isBreak(word)) { finish(); tokens.push({ start: word.start, end: word.end, kind: "separator" }); } else part.push(word);
  }
  finish();
  tokens.sort((a, b) => a.start - b.start);
  return { tokens, row };
}

/** No statement has as many words; a long paste is thus read in linear time. */
const LONGEST_STATEMENT = 40;

/** A part may hold several statements without commas: "Ca 62 mg/L Mg 6 mg/L pH 7.9". */
function readPart(part: readonly Word[], row: ParsedLine["row"], tokens: LineToken[]): void {
  let at = 0;
  while (at < part.length) at += readStatement(part.slice(at, at + LONGEST_STATEMENT), row, tokens);
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
  const place = mark(span, "analyte", written.toLowerCase() === field.key.toLowerCase() ? {} : { shown: field.key });
  tokens.push(place);
  let at = named.used;
  while (part[at] && FILLERS.has(part[at].text.toLowerCase())) tokens.push(mark(part[at++], "separator"));
  if (!isNumber(part[at])) {
    const unit = unitBehind(part.slice(at), field);
    if (unit.isKnown) {
      tokens.push(mark({ text: "", start: part[at].start, end: part[at + unit.used - 1].end }, "unit"));
      at += unit.used;
    }
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

/** "1,234.5" as "1234.5"; a comma is a decimal sign here. */
const withoutThousands = (text: string): string | null => (/^\d{1,3}(,\d{3})+(\.\d+)?$/.test(text) ? text.replaceAll(",", "") : null);

/** A word that is no name: it is marked, and what belongs to it is passed over, so that one slip makes one fault. */
function skipUnknown(part: readonly Word[], tokens: LineToken[]): number {
  const text = part[0].text;
  const suggestion = withoutThousands(text) ?? nearestName(text, NAMES) ?? undefined;
  tokens.push(mark(part[0], "unknown", { suggestion, problem: `“${text}” is neither an analyte nor a condition.` }));
  let at = 1;
  if (isNumber(part[at])) tokens.push(mark(part[at++], "number"));
  while (part[at] && !isNumber(part[at]) && !longestName(part.slice(at))) tokens.push(mark(part[at++], "unit"));
  return at;
}

/** "8.4 °C" by itself is the temperature, and a name may come behind: "62 mg/L Ca", "7.9 pH". Any other number is asked about. */
function readNameless(part: readonly Word[], row: ParsedLine["row"], tokens: LineToken[]): number {
  if (part[1] && isCelsius(part)) return readValue(part, { field: ROW_FIELDS.get("temperature")!, basis: null, unit: null }, row, tokens);
  const behind = nameBehind(part);
  if (behind) {
    const end = behind.from + behind.used;
    readValue(part.slice(0, behind.from), behind.name, row, tokens);
    tokens.push(mark({ text: "", start: part[behind.from].start, end: part[end - 1].end }, "analyte"));
    return end;
  }
  tokens.push(mark(part[0], "unknown", { problem: "A number without a name: what was measured? For example Ca 62 mg/L, or 8.4 °C." }));
  return part[1] && !isNumber(part[1]) && !longestName(part.slice(1)) ? (tokens.push(mark(part[1], "unit")), 2) : 1;
}

/** A K behind a number is potassium, unless nothing follows it and the number is a temperature of water in kelvin. */
function isCelsius(part: readonly Word[]): boolean {
  if (/^(°|°c|degc|c)$/i.test(part[1].text)) return true;
  return part[1].text === "K" && !part[2] && Number(numberText(part[0].text)) >= 273.15;
}

function nameBehind(part: readonly Word[]): { name: Name; from: number; used: number } | null {
  for (let from = 1; from < Math.min(6, part.length); from++) {
    if (isNumber(part[from])) return null;
    const named = longestName(part.slice(from));
    if (!named || isNumber(part[from + named.used])) continue;
    const unit = unitBehind(part.slice(1, from), named.name.field);
    if (from === 1 ? named.name.field.kind === "number" : unit.isKnown && unit.used === from - 1) return { ...named, from };
  }
  return null;
}

/** What to write for a unit that a field does not take: the same without its basis, the same with one, or the most alike. */
function unitInstead(spelled: string, field: Field): string {
  if (!("message" in unitScale(field, spelled, null))) return spelled;
  const options = unitsOf(field);
  return options.find((each) => each.startsWith(`${spelled} as `)) ?? nearestName(spelled, options) ?? options[0];
}

/** Number, unit and basis. @returns how many words they are. */
function readValue(part: readonly Word[], name: Name, row: ParsedLine["row"], tokens: LineToken[]): number {
  const { field } = name;
  const number = part[0];
  const { used, unit, as } = unitBehind(part.slice(1), field);
  const span: Word | null = used > 0 ? { text: "", start: part[1].start, end: part[used].end } : null;
  const place = mark(number, "number");
  tokens.push(place);
  if (span) tokens.push(mark(span, "unit"));
  const last = tokens[tokens.length - 1];
  const spelled = unit ?? name.unit ?? (name.basis ? field.defaultUnit : "");
  const basis = as ?? name.basis;
  const text = [numberText(number.text), spelled, basis && !/eq\//.test(spelled) ? `as ${basis}` : ""].filter(Boolean).join(" ");
  const read = readQuantity(text, field);
  if (isProblem(read)) {
    last.problem = `${read.message} ${read.remedy}`;
    if (span) last.suggestion = unitInstead(spelled, field);
    return 1 + used;
  }
  const range = rangeProblem(read.base, field);
  if (range) place.problem = range.message;
  else if (Object.hasOwn(row, field.key)) place.problem = `${field.key} is given twice.`;
  else row[field.key] = field.kind === "number" ? read.value : field.kind === "temperature" ? Number(read.base.toFixed(9)) : spelled === "" ? `${numberText(number.text)} ${field.defaultUnit}` : text;
  return 1 + used;
}

interface UnitRead { used: number; unit: string | null; as: string | null; isKnown: boolean }

/** The unit behind a number, with "as N" or a bare formula for a basis. One word that is no name counts as a unit meant. */
function unitBehind(rest: readonly Word[], field: Field): UnitRead {
  const none = { used: 0, unit: null, as: null, isKnown: false };
  if (!rest[0]) return none;
  for (let count = Math.min(4, rest.length); count > 0; count--) {
    const { unit, as } = splitUnit(rest.slice(0, count).map((word) => word.text).join(" "));
    if (unit === "" || "message" in unitScale(field, unit, as)) continue;
    const basis = as === null && rest[count]?.text.toLowerCase() === "as" ? rest[count + 1] : undefined;
    // A basis that the longer readings did not take is part of the unit all the same.
    return basis ? { used: count + 2, unit, as: basis.text, isKnown: false } : { used: count, unit, as, isKnown: true };
  }
  // Words such as "mg/L" that this field does not take are still its unit; a name begins the next statement.
  const isHalfUnit = rest[0].text === "mg" && !isNumber(rest[1]);
  if (isNumber(rest[0]) || FILLERS.has(rest[0].text.toLowerCase()) || !isHalfUnit && longestName(rest)) return none;
  const hasBasis = rest[1]?.text.toLowerCase() === "as" && rest[2];
  return { used: hasBasis ? 3 : 1, unit: spellUnit(rest[0].text), as: hasBasis ? rest[2].text : null, isKnown: false };
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
      // Whoever names the organic carbon means its acids to count; which model is shown with the answer.
      ...(line.row.DOC !== undefined ? { organic: { model: "hruska-2003" as const } } : {}),
    }],
  };
}
