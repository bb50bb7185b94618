/**
 * Changes to a water or its case, the way they are said: "calcite, open, pCO2 4200 ppm, 18 °C, Ca 80 mg/L". Used by the
 * command that tries another case. The words are read here; whether a quantity makes sense is for checkSpec alone.
 */
import { ANALYTES, SOLIDS } from "./named-constants";
import type { JobSpec } from "@/lib/schemas/job-spec";
import type { Completion, Mark } from "./command";
import type { LineProblem } from "./entry";
import { closeOver, type Close } from "./close-facts";
import { joined, type Word } from "./words";
import { nearestName } from "@/lib/schemas/nearest-name";

export const ACTIVITY_MODELS = ["ideal", "guntelberg", "davies", "debye-huckel", "truesdell-jones"] as const;
export const ORGANIC_MODELS = ["oliver-1983", "hruska-2003", "driscoll-1994"] as const;
/** Dry air of the present decade; what "open" means where a case names no pressure. */
export const AMBIENT_CO2 = "420 ppm";
const PRESSURE_UNITS = ["ppm", "uatm", "µatm", "μatm", "atm", "Pa", "kPa", "bar"];
const FILLERS = new Set(["with", "add", "and", "at", "to", "in", "the", "of", ","]);

/** One change; `apply` edits a copy of the spec and `answered` holds the entry's own results for "x10". */
export interface CaseChange {
  /** Shown in the entry's head and used as the case's name. */
  label: string;
  words: Word[];
  apply(spec: JobSpec, answered: Answered): void;
}

/** Columns of the entry's first answered row; empty while nothing is known. */
export type Answered = Record<string, number | string | null>;

type Case = JobSpec["cases"][number];
type React = NonNullable<Case["react"]>;

/** Default of `react.gas` by the spec's rule: open where the pressure is one of the facts. */
function reactOf(each: Case): React {
  each.react ??= {};
  return each.react;
}

const hasPressureFact = (each: Case): boolean => (each.close as Close | undefined)?.includes("pCO2") ?? false;

/** The gas stays open at the pressure that closes the water, or is opened to the air where none does. */
function openGas(each: Case, pressure: string | null): void {
  const react = reactOf(each);
  if (hasPressureFact(each)) {
    if (pressure) each.pCO2 = pressure;
    react.gas = "open";
  } else react.gas = pressure ?? AMBIENT_CO2;
}

/** Sets the CO2 pressure: the fact itself where the case closes on it, else the gas the water meets. */
function setPressure(each: Case, pressure: string | number): void {
  if (hasPressureFact(each)) each.pCO2 = pressure;
  else reactOf(each).gas = pressure;
}

const solidName = (text: string): string | null =>
  SOLIDS.find((solid) => solid.name.toLowerCase() === text.toLowerCase())?.name ?? null;

const NUMBER = /^[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d+)?$/i;
const FACTOR = /^(?:[x×](\d+\.?\d*|\.\d+)|(\d+\.?\d*|\.\d+)[x×])$/i;

/** A number with the unit glued to it ("420ppm", "18°C") as two words. */
function unglue(words: readonly Word[]): Word[] {
  return words.flatMap((word) => {
    const match = /^([+-]?(?:\d+\.?\d*|\.\d+)(?:e[+-]?\d+)?)([a-zµμ°%].*)$/i.exec(word.text);
    if (!match || FACTOR.test(word.text)) return [word];
    const cut = word.start + match[1].length;
    return [{ text: match[1], start: word.start, end: cut }, { text: match[2], start: cut, end: word.end }];
  });
}

interface Step { change: CaseChange | null; used: number; problem?: LineProblem; shown?: string }
type Reader = (words: readonly Word[], at: number) => Step | null;

const problemAt = (words: readonly Word[], message: string, suggestion?: string): Step => {
  const place = joined(words);
  return { change: null, used: words.length, problem: { start: place.start, end: place.end, message, suggestion } };
};

/** Longest run of words from `at` that names a solid. */
function solidAt(words: readonly Word[], at: number): { name: string; used: number } | null {
  for (let used = Math.min(3, words.length - at); used > 0; used--) {
    const name = solidName(joined(words.slice(at, at + used)).text);
    if (name) return { name, used };
  }
  return null;
}

const readSolid: Reader = (words, at) => {
  const found = solidAt(words, at);
  if (!found) return null;
  const rest = words.slice(at + found.used);
  const supply = readSupply(rest);
  const used = found.used + supply.used;
  const label = supply.label ? `${found.name} ${supply.label}` : `with ${found.name}`;
  return {
    used, shown: supply.label ?? "in excess",
    change: {
      label, words: words.slice(at, at + used),
      apply: (spec) => {
        const react = reactOf(spec.cases[0]);
        react.solids = { ...react.solids, [found.name]: { supply: supply.supply, ...(supply.si === null ? {} : { saturation: supply.si }) } };
      },
    },
  };
};

/** What stands behind a solid: nothing (excess), "may form", an amount, or "SI 0.3". */
function readSupply(rest: readonly Word[]): { supply: string; label: string | null; si: number | null; used: number } {
  const [first, second] = rest.map((word) => word.text.toLowerCase());
  if (first === "may" && second === "form") return { supply: "may-form", label: "may form", si: null, used: 2 };
  if (first === "may-form") return { supply: "may-form", label: "may form", si: null, used: 1 };
  if (first === "excess") return { supply: "excess", label: null, si: null, used: 1 };
  if (first === "si" && second !== undefined && NUMBER.test(second)) return { supply: "excess", label: `at SI ${second}`, si: Number(second), used: 2 };
  if (first !== undefined && NUMBER.test(first) && second !== undefined && /mol|mg|g\/l|eq/i.test(second)) {
    const amount = `${rest[0].text} ${rest[1].text}`;
    return { supply: amount, label: amount, si: null, used: 2 };
  }
  return { supply: "excess", label: null, si: null, used: 0 };
}

const readWithout: Reader = (words, at) => {
  if (!/^(no|without)$/i.test(words[at].text)) return null;
  const next = words[at + 1];
  if (next && /^(solids?|reaction)$/i.test(next.text)) {
    return { used: 2, change: { label: "no solid", words: words.slice(at, at + 2), apply: (spec) => { delete spec.cases[0].react; } } };
  }
  const found = next ? solidAt(words, at + 1) : null;
  if (!found) return problemAt(words.slice(at, at + 2), "Which solid should go? For example: no calcite, or no solids.");
  return {
    used: 1 + found.used,
    change: {
      label: `without ${found.name}`, words: words.slice(at, at + 1 + found.used),
      apply: (spec) => { delete spec.cases[0].react?.solids?.[found.name as never]; },
    },
  };
};

const readGas: Reader = (words, at) => {
  const word = words[at].text.toLowerCase();
  if (word === "closed") {
    return { used: 1, shown: "no gas", change: { label: "closed", words: [words[at]], apply: (spec) => { reactOf(spec.cases[0]).gas = "closed"; } } };
  }
  if (word !== "open") return null;
  const next = words.slice(at + 1).filter((each) => !/^(to|at|the|air)$/i.test(each.text));
  const skipped = words.slice(at + 1).findIndex((each) => !/^(to|at|the|air)$/i.test(each.text));
  const fillers = skipped < 0 ? words.length - at - 1 : skipped;
  const pressure = next[0] && NUMBER.test(next[0].text) && next[1] && PRESSURE_UNITS.includes(next[1].text) ? `${next[0].text} ${next[1].text}` : null;
  const used = 1 + fillers + (pressure ? 2 : 0);
  return {
    used, shown: pressure ?? "to the air",
    change: { label: pressure ? `open at ${pressure}` : "open", words: words.slice(at, at + used), apply: (spec) => openGas(spec.cases[0], pressure) },
  };
};

const readPressure: Reader = (words, at) => {
  if (!/^p?co2$/i.test(words[at].text)) return null;
  const value = words[at + 1];
  const factor = value && FACTOR.exec(value.text);
  if (factor) {
    const times = Number(factor[1] ?? factor[2]);
    return {
      used: 2, shown: `${times} times the entry's`,
      change: {
        label: `pCO2 ×${times}`, words: words.slice(at, at + 2),
        apply: (spec, answered) => {
          if (typeof answered.pCO2 === "number") setPressure(spec.cases[0], Number((answered.pCO2 * times).toPrecision(6)));
        },
      },
    };
  }
  if (!value || !NUMBER.test(value.text)) return problemAt(words.slice(at, at + 2), "A pressure follows: for example pCO2 420 ppm, or pCO2 x10.");
  const unit = words[at + 2];
  if (!unit || !PRESSURE_UNITS.includes(unit.text)) {
    return problemAt(unit && unit.text !== "," ? [unit] : [value], `A pressure needs its unit: ${["ppm", "uatm", "atm", "Pa", "kPa", "bar"].join(", ")}.`, unit && unit.text !== "," ? nearestName(unit.text, PRESSURE_UNITS) ?? undefined : `${value.text} ppm`);
  }
  const pressure = `${value.text} ${unit.text}`;
  return { used: 3, change: { label: `pCO2 ${pressure}`, words: words.slice(at, at + 3), apply: (spec) => setPressure(spec.cases[0], pressure) } };
};

const readTemperature: Reader = (words, at) => {
  const isNamed = /^(t|temp|temperature)$/i.test(words[at].text);
  const value = words[isNamed ? at + 1 : at];
  const unit = words[isNamed ? at + 2 : at + 1];
  const isUnit = unit !== undefined && /^(°c|°|c|degc|degrees?)$/i.test(unit.text);
  if (!isNamed && !(NUMBER.test(words[at].text) && isUnit)) return null;
  if (!value || !NUMBER.test(value.text)) return problemAt(words.slice(at, at + 2), "A temperature follows: for example 18 °C.");
  const used = (isNamed ? 2 : 1) + (isUnit ? 1 : 0);
  const celsius = Number(value.text);
  if (celsius < 0 || celsius > 90) return problemAt([value], `${value.text} °C is outside 0 to 90 °C.`);
  return { used, change: { label: `${value.text} °C`, words: words.slice(at, at + used), apply: (spec) => { spec.cases[0].temperature = celsius; } } };
};

const readModel: Reader = (words, at) => {
  const word = words[at].text.toLowerCase();
  const next = words[at + 1]?.text.toLowerCase();
  const activity = ACTIVITY_MODELS.find((name) => name === (word === "activity" ? next : word));
  if (activity) {
    const used = word === "activity" ? 2 : 1;
    return { used, shown: "activity", change: { label: activity, words: words.slice(at, at + used), apply: (spec) => { spec.cases[0].activity = activity; } } };
  }
  if (word === "activity") return problemAt(words.slice(at, at + 2), `An activity model follows: ${ACTIVITY_MODELS.join(", ")}.`, next ? suggestion(word, next, ACTIVITY_MODELS) : undefined);
  const isNamed = word === "organic" || word === "organics";
  const model = [...ORGANIC_MODELS, ...(isNamed ? ["none" as const] : [])].find((name) => name === (isNamed ? next : word));
  if (model) {
    const used = isNamed ? 2 : 1;
    return { used, shown: "organic acids", change: { label: model === "none" ? "no organic acids" : model, words: words.slice(at, at + used), apply: (spec) => { spec.cases[0].organic = { model }; } } };
  }
  if (isNamed) return problemAt(words.slice(at, at + 2), `An organic model follows: ${ORGANIC_MODELS.join(", ")} or none.`, next ? suggestion(word, next, ORGANIC_MODELS) : undefined);
  if (word !== "complexes") return null;
  if (next !== "all" && next !== "none") return problemAt(words.slice(at, at + 2), "all or none follows.", "complexes none");
  return { used: 2, change: { label: `complexes ${next}`, words: words.slice(at, at + 2), apply: (spec) => { spec.cases[0].complexes = next; } } };
};

const suggestion = (name: string, word: string, names: readonly string[]): string | undefined => {
  const near = nearestName(word, names);
  return near ? `${name} ${near}` : undefined;
};

const analyteKey = (text: string): string | null => {
  if (/^ph$/i.test(text)) return "pH";
  const exact = ANALYTES.find((each) => each.key === text);
  const lower = text.toLowerCase();
  return (exact ?? ANALYTES.find((each) => each.key.toLowerCase() === lower || each.synonyms.includes(lower)))?.key ?? null;
};

const readAmount: Reader = (words, at) => {
  const key = analyteKey(words[at].text);
  if (!key) return null;
  let end = at + 1;
  while (end < words.length && words[end].text !== "," && !(end > at + 1 && startsChange(words, end))) end++;
  const amount = joined(words.slice(at + 1, end)).text;
  if (!/^<?\s*[+-]?[\d.]/.test(amount)) return problemAt(words.slice(at, Math.max(end, at + 1)), `An amount follows ${key}: for example ${key === "pH" ? "pH 7.4" : `${key} 40 mg/L`}.`);
  return {
    used: end - at,
    change: {
      label: `${key} ${amount}`, words: words.slice(at, end),
      apply: (spec) => {
        const rows = "rows" in spec.waters ? spec.waters.rows : undefined;
        if (rows?.[0]) (rows[0] as Record<string, unknown>)[key] = key === "pH" && NUMBER.test(amount) ? Number(amount) : amount;
        if (key === "pH" || key === "ANC" || key === "DIC" || key === "alkalinity") {
          closeOver(spec.cases[0], key);
          delete (spec.cases[0] as Record<string, unknown>)[key];
        }
      },
    },
  };
};

const READERS: readonly Reader[] = [readWithout, readSolid, readGas, readPressure, readTemperature, readModel, readAmount];
const NEW_CHANGE: readonly Reader[] = [readWithout, readSolid, readGas, readPressure, readModel];
const startsChange = (words: readonly Word[], at: number): boolean =>
  analyteKey(words[at].text) !== null || NEW_CHANGE.some((reader) => reader(words, at)?.change);

/** Words that a change may begin with, for completion and corrections. */
export const CHANGE_WORDS: readonly Completion[] = [
  { insert: "calcite", detail: "in equilibrium with calcite" },
  { insert: "open", detail: "gas exchanged with the air, or at a pressure" },
  { insert: "closed", detail: "no gas exchanged" },
  { insert: "pCO2", detail: "CO2 pressure, or x10" },
  { insert: "temperature", detail: "°C" },
  { insert: "activity", detail: "model of activity coefficients" },
  { insert: "organic", detail: "model of organic acids" },
  { insert: "complexes", detail: "all or none" },
  { insert: "no solids", detail: "the water by itself" },
  ...SOLIDS.filter((solid) => solid.name !== "calcite").map((solid) => ({ insert: solid.name, detail: "in excess; or may form; or an amount" })),
];

export interface ReadChanges { changes: CaseChange[]; problems: LineProblem[]; marks: Mark[] }

/** Reads changes in any order, commas or not. Every unknown word is marked, with the nearest known one beside it. */
export function readChanges(given: readonly Word[]): ReadChanges {
  const words = unglue(given);
  const result: ReadChanges = { changes: [], problems: [], marks: [] };
  let at = 0;
  while (at < words.length) {
    const word = words[at];
    if (FILLERS.has(word.text.toLowerCase())) { at++; continue; }
    let step: Step | null = null;
    for (const reader of READERS) if ((step = reader(words, at))) break;
    if (!step) {
      const near = nearestName(word.text, [...CHANGE_WORDS.map((each) => each.insert), ...ACTIVITY_MODELS, ...ORGANIC_MODELS, ...ANALYTES.map((each) => each.key)]);
      step = problemAt([word], `“${word.text}” is not a change that can be tried.`, near ?? undefined);
    }
    if (step.problem) result.problems.push(step.problem);
    if (step.change) {
      result.changes.push(step.change);
      const place = joined(step.change.words);
      result.marks.push({ start: place.start, end: place.end, kind: "name", shown: step.shown });
    }
    at += Math.max(1, step.used);
  }
  return result;
}

/** The spec with the changes made and its case named after them. */
export function applyChanges(spec: JobSpec, changes: readonly CaseChange[], answered: Answered): JobSpec {
  const copy = structuredClone(spec);
  for (const change of changes) change.apply(copy, answered);
  copy.cases[0].name = changes.map((change) => change.label).join(", ").slice(0, 100);
  return copy;
}

/** What may stand behind the finished words of a change. */
export function completeChange(before: readonly Word[], partial: string): Completion[] {
  const last = before[before.length - 1]?.text.toLowerCase();
  const named = (names: readonly string[], detail: string): Completion[] => names.map((insert) => ({ insert, detail }));
  if (last === "activity") return starting(named(ACTIVITY_MODELS, "activity model"), partial);
  if (last === "organic") return starting(named([...ORGANIC_MODELS, "none"], "organic acids"), partial);
  if (last === "complexes") return starting(named(["all", "none"], "ion pairs"), partial);
  if (last === "no" || last === "without") return starting(named(["solids", ...SOLIDS.map((solid) => solid.name)], "leave out"), partial);
  if (last === "pco2" || last === "co2" || last === "open") return starting([{ insert: "420 ppm", detail: "present-day air" }, { insert: "4200 ppm", detail: "ten times that" }, ...(last === "open" ? [] : [{ insert: "x10", detail: "ten times the entry's" }])], partial);
  if (last !== undefined && NUMBER.test(last)) {
    const field = before[before.length - 2]?.text.toLowerCase();
    const units = field === "pco2" || field === "co2" ? ["ppm", "uatm", "atm", "kPa"] : field === "temperature" ? ["°C"] : ["mg/L", "mmol/L", "meq/L", "°C"];
    return starting(named(units, "unit"), partial);
  }
  return starting([...CHANGE_WORDS, ...ANALYTES.map((each) => ({ insert: each.key, detail: each.description }))], partial);
}

const starting = (all: readonly Completion[], partial: string): Completion[] =>
  all.filter((each) => each.insert.toLowerCase().startsWith(partial.toLowerCase()));
