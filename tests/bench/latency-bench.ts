/**
 * A typed water on its way through the product, without socket and database: the line is parsed, becomes a document, is checked from its
 * bytes as POST /solve does, solved and written as JSON. Beside it what the kernel alone needs for the same row. Seeded; p50 and p95.
 */
import { compileJob } from "@/lib/chemistry/compile-job";
import { parseWaterLine, specForLine } from "@/lib/chemistry/parse-water";
import { resolveJob } from "@/lib/chemistry/resolve-job";
import { commandActor } from "@/lib/services/access";
import { intakeSpec } from "@/lib/services/intake/run-intake";
import { solveSpec } from "@/lib/services/solve/solve-spec";

const ROUNDS = 400;
const WARM_UP = 100;
/** A person sees an answer at once below this; the product's own part must be a small share of it. */
const MOST_P95_MS = 50;

const actor = commandActor({ id: "usr_bench", email: "bench@sallowmere.example", name: "Bench", role: "modeller" });

/** A line as somebody types it, another one each time, so that nothing can be kept from the one before. */
const lineOf = (round: number): string =>
  `Ca ${(40 + (round % 50)).toFixed(1)} mg/L, Mg ${(3 + (round % 7)).toFixed(1)} mg/L, Na 5.1 mg/L, Cl 12.4 mg/L, SO4 29 mg/L, alkalinity 2.71 meq/L, pH ${(7.2 + (round % 11) / 10).toFixed(2)}, 8.4 °C`;

function quantile(times: readonly number[], share: number): number {
  return [...times].sort((a, b) => a - b)[Math.floor(share * (times.length - 1))];
}

async function through(line: string): Promise<number> {
  const started = performance.now();
  const bytes = new TextEncoder().encode(JSON.stringify(specForLine(parseWaterLine(line))));
  const answer = JSON.stringify(await solveSpec(actor, await intakeSpec(bytes)));
  const took = performance.now() - started;
  if (!answer.includes('"status":"ok"')) throw new Error(`not solved: ${line}`);
  return took;
}

function kernelAlone(line: string): number {
  const spec = specForLine(parseWaterLine(line));
  const compiled = compileJob(resolveJob(spec, (spec.waters as { rows: Record<string, unknown>[] }).rows));
  compiled.solve(0, 1); // constants at this temperature are made at the first row
  const started = performance.now();
  compiled.solve(0, 1);
  return performance.now() - started;
}

const product: number[] = [];
const kernel: number[] = [];
for (let round = -WARM_UP; round < ROUNDS; round++) {
  const line = lineOf(round + WARM_UP);
  const times = [await through(line), kernelAlone(line)];
  if (round >= 0) [product, kernel].forEach((list, index) => list.push(times[index]));
}
const show = (name: string, times: readonly number[]) => console.log(`${name.padEnd(36)} p50 ${quantile(times, 0.5).toFixed(3)} ms   p95 ${quantile(times, 0.95).toFixed(3)} ms`);
show("typed water, text to JSON", product);
show("kernel alone, one row", kernel);
console.log(`ratio                                p50 ${(quantile(product, 0.5) / quantile(kernel, 0.5)).toFixed(1)}      p95 ${(quantile(product, 0.95) / quantile(kernel, 0.95)).toFixed(1)}`);
if (quantile(product, 0.95) > MOST_P95_MS) {
  console.error(`A typed water takes more than ${MOST_P95_MS} ms.`);
  process.exitCode = 1;
}
