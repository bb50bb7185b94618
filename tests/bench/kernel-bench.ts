/**
 * Speed of the kernel on one core: rows per second of full waters (charge + pCO2, Davies), the same with calcite, pH + alkalinity, and a
 * one-unknown curve. Seeded, so that two runs time the same work. Run: npm run bench [-- rows]
 * Exits with 1 where full waters fall below the floor.
 */
import { compileJob } from "@/lib/chemistry/compile-job";
import type { ResolvedCase, ResolvedWater } from "@/lib/chemistry/types";
import { closing, makeCase, makeJob, makeWater, meeting } from "@/tests/unit/kernel-fixtures";

const FLOOR = 10_000; // full waters a second on one core
const ROUNDS = 5;
const rowCount = Number(process.argv[2] ?? 20_000);

/** Mulberry32: a small seeded generator. */
function randomNumbers(seed: number): () => number {
  let state = seed;
  return () => {
    state = (state + 0x6d2b79f5) | 0;
    let t = Math.imul(state ^ (state >>> 15), 1 | state);
    t = (t + Math.imul(t ^ (t >>> 7), 61 | t)) ^ t;
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
  };
}

function randomWaters(count: number): ResolvedWater[] {
  const random = randomNumbers(7);
  const between = (low: number, high: number) => low * (high / low) ** random();
  return Array.from({ length: count }, (_, k) => makeWater({
    id: `${k}`, temperature: Math.round(250 * random()) / 10, pCO2: { atm: between(3e-4, 3e-2) }, pH: 6.5 + 2 * random(), alkalinity: between(2e-4, 6e-3), ANC: between(1e-5, 6e-3),
    totals: {
      Na: between(1e-4, 3e-3), K: between(1e-5, 3e-4), NH4: between(1e-7, 1e-4), Ca: between(1e-4, 3e-3), Mg: between(5e-5, 1e-3), Al: between(1e-8, 1e-5),
      Cl: between(1e-4, 3e-3), SO4: between(1e-5, 1e-3), F: between(1e-6, 1e-4), NO3: between(1e-6, 1e-3),
    },
  }));
}

const waters = randomWaters(rowCount);
const bare = waters.map((w) => ({ ...w, totals: {} }));
const runs: { name: string; waters: ResolvedWater[]; kase: Partial<ResolvedCase>; floor: number }[] = [
  { name: "full water, charge + pCO2, Davies", waters, kase: closing("charge", "pCO2"), floor: FLOOR },
  { name: "the same, calcite in excess", waters, kase: { ...closing("charge", "pCO2"), ...meeting("open", { calcite: "excess" }) }, floor: 0 },
  { name: "the same, calcite and gibbsite may form", waters, kase: { ...closing("charge", "pCO2"), ...meeting("open", { calcite: "may-form", gibbsite: "may-form" }) }, floor: 0 },
  { name: "pH + alkalinity", waters, kase: closing("pH", "alkalinity"), floor: 0 },
  { name: "charge + saturated calcite (scanned)", waters: waters.slice(0, Math.ceil(rowCount / 20)), kase: closing("charge", "saturated"), floor: 0 },
  { name: "ANC + pCO2, no ions", waters: bare, kase: closing("ANC", "pCO2"), floor: 0 },
];

let isBelowFloor = false;
for (const run of runs) {
  const compiled = compileJob(makeJob(run.waters, [makeCase(run.kase)], { report: [] }));
  const rates: number[] = [];
  let counts = "";
  for (let round = 0; round < ROUNDS; round++) {
    const start = performance.now();
    const rows = compiled.solve(0, compiled.rowCount);
    rates.push(compiled.rowCount / ((performance.now() - start) / 1000));
    const ok = rows.status.filter((s) => s === 0).length;
    const iterations = rows.iterations.reduce((sum, n) => sum + n, 0) / compiled.rowCount;
    const worst = rows.residual.reduce((most, r) => (r > most ? r : most), 0);
    counts = `${ok} of ${compiled.rowCount} ok, ${iterations.toFixed(1)} iterations a row, residual ≤ ${worst.toExponential(1)}`;
  }
  rates.sort((a, b) => a - b);
  const median = rates[Math.floor(ROUNDS / 2)];
  if (median < run.floor) isBelowFloor = true;
  console.log(`${run.name.padEnd(42)} ${Math.round(median).toLocaleString("en").padStart(9)} rows/s  (${counts})`);
}
if (isBelowFloor) {
  console.error(`Full waters ran below ${FLOOR.toLocaleString("en")} rows/s.`);
  process.exitCode = 1;
}
