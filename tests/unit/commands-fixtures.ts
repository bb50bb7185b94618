import type { ConsoleHost, ConsoleView } from "@/lib/commands/command";
import type { Entry, EntryBody } from "@/lib/commands/entry";
import { COMMANDS } from "@/lib/commands/registry";
import { requestOf } from "@/lib/commands/read-line";
import type { SolveResponse } from "@/lib/schemas/api";
import type { JobSpec } from "@/lib/schemas/job-spec";

/** A spec as a typed water gives it: closed by pH and alkalinity. */
export const WATER_SPEC = {
  spec: 1,
  waters: { rows: [{ id: "water", Ca: "62 mg/L", alkalinity: "2.71 meq/L", pH: 7.9, temperature: 8.4 }] },
  cases: [{ name: "as typed", close: ["pH", "alkalinity"] }],
} as unknown as JobSpec;

/** An answer with invented figures: tests of the commands look at what is sent, not at chemistry. */
export const ANSWER: SolveResponse = {
  rows: [{ water: "water", case: "as typed", status: "ok", message: "", warnings: "", iterations: 7, residual: 1e-13, pH: 7.9, ANC: 2710, alkalinity: 2710, pCO2: 0.002, DIC: 0.0028, ionicStrength: 0.004, "SI:calcite": 0.11 }],
  columns: [
    { name: "water", type: "text", unit: "", basis: null, description: "Id of the water", group: "row" },
    { name: "pH", type: "number", unit: "", basis: null, description: "pH", group: "main" },
    { name: "ANC", type: "number", unit: "µeq/L", basis: null, description: "ANC", group: "main" },
    { name: "SI:calcite", type: "number", unit: "", basis: null, description: "Saturation index", group: "SI" },
  ],
  summary: { rows: 1, ok: 1, invalid: 0, notConverged: 0, warned: 0, milliseconds: 1, engineVersion: "test", constantsVersion: "test" },
  warnings: [],
};

export const entryWith = (number: number, body: EntryBody, line = "Ca 62 mg/L, alkalinity 2.71 meq/L, pH 7.9, 8.4 °C"): Entry =>
  ({ number, at: "2026-10-14T09:00:00Z", line, body });

export const answeredWater = (number: number, spec: JobSpec = WATER_SPEC): Entry =>
  entryWith(number, { kind: "state", spec, response: ANSWER, from: null, changes: [] });

export const gridEntry = (number: number): Entry =>
  entryWith(number, { kind: "grid", spec: WATER_SPEC, response: ANSWER, from: 1, field: "pCO2", y: "pH", caption: "" }, "range pCO2 200 to 20000 ppm");

export function consoleView(given: Partial<ConsoleView> = {}): ConsoleView {
  const view: ConsoleView = {
    entries: [], sets: [], jobs: [], role: "modeller", origin: "http://127.0.0.1:3000", undoable: 0,
    commandNames: COMMANDS.map((command) => command.name), requestOf: (line) => requestOf(line, view), ...given,
  };
  return view;
}

export interface HostRecord { host: ConsoleHost; calls: [string, ...unknown[]][]; answers: EntryBody[] }

/** A host that writes down what commands ask of it. */
export function recordingHost(view: ConsoleView): HostRecord {
  const calls: [string, ...unknown[]][] = [];
  const answers: EntryBody[] = [];
  const note = <T>(name: string, result: T) => (...args: unknown[]): T => { calls.push([name, ...args]); return result; };
  const job = { id: "job_newnewnewnewnewnewne", title: "New job" };
  const host = {
    view: () => view, answer: (body: EntryBody) => { answers.push(body); },
    solve: note("solve", Promise.resolve(ANSWER)), submit: note("submit", Promise.resolve(job)), cancelJob: note("cancelJob", Promise.resolve(job)),
    listJobs: note("listJobs", Promise.resolve([])), listSets: note("listSets", Promise.resolve([])),
    constants: note("constants", Promise.resolve({ constantsVersion: "test", temperature: 25, entries: [] })),
    navigate: note("navigate", undefined), openEditor: note("openEditor", undefined), copyText: note("copyText", Promise.resolve()),
    saveFile: note("saveFile", undefined), chooseTheme: note("chooseTheme", undefined), clearEntries: note("clearEntries", 1),
    undoClear: note("undoClear", 1), signOut: note("signOut", Promise.resolve()),
  } as unknown as ConsoleHost;
  return { host, calls, answers };
}
