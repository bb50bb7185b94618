/**
 * `npm run fuzz -- --rows N --seed S [--json] [--row K]`: N drawn rows, counts by outcome and by reason. Exits with 1 where a row is false,
 * not converged or thrown. `--row K` solves one row of that seed again and shows it.
 */
import { drawCase, drawWater, WATERS_PER_CASE } from "./draw";
import { fuzz } from "./fuzz";

const option = (name: string, otherwise: number): number => {
  const at = process.argv.indexOf(`--${name}`);
  const value = at < 0 ? otherwise : Number(process.argv[at + 1]);
  if (!Number.isInteger(value) || value < 0) { console.error(`--${name} needs a whole number, 0 or more.`); process.exit(2); }
  return value;
};
const seed = option("seed", 1);
const isJson = process.argv.includes("--json");
const single = process.argv.includes("--row") ? option("row", 0) : -1;
const rows = single >= 0 ? 1 : option("rows", 20_000);
const started = performance.now();
if (single >= 0 && !isJson) {
  console.log(JSON.stringify(drawCase(seed, Math.floor(single / WATERS_PER_CASE))));
  console.log(JSON.stringify(drawWater(seed, single)));
}
const { tally, reasons, warnings, offenders, worst, slowest } = fuzz({ rows, seed, from: Math.max(single, 0), onRow: single >= 0 && !isJson ? (_, text) => console.log(text) : undefined });
if (isJson) console.log(JSON.stringify(tally));
else {
  const seconds = (performance.now() - started) / 1000;
  console.log(`seed ${seed}: ${rows} rows in ${seconds.toFixed(1)} s, ${Math.round(rows / seconds)} rows/s with all checks; slowest row ${slowest.row} took ${slowest.ms.toFixed(0)} ms`);
  console.log(Object.entries(tally).map(([name, count]) => `${name} ${count}`).join("  "));
  console.log(`largest error of an ok row, computed again: ${worst.toExponential(1)}`);
  const show = (title: string, table: Map<string, number>) => {
    console.log(`\n${title}`);
    for (const [name, count] of [...table].sort((a, b) => b[1] - a[1])) console.log(`${String(count).padStart(8)}  ${name}`);
  };
  show("reasons", reasons);
  show("warnings", warnings);
  if (offenders.length > 0) console.log(`\nfirst offenders (npm run fuzz -- --seed ${seed} --row K)`);
  for (const { row, what, why } of offenders) console.log(`${String(row).padStart(8)}  ${what}: ${why}`);
}
if (tally.notConverged + tally.falseOk + tally.falseInvalid + tally.thrown > 0) process.exitCode = 1;
