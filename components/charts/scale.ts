/** Scales of charts: from values to pixels, and the round values that are marked. */

export interface Scale { at(value: number): number; ticks: number[] }

/** Round steps of 1, 2 or 5 times a power of ten, about `count` of them. */
export function linearTicks(low: number, high: number, count: number): number[] {
  const raw = (high - low) / count;
  const power = 10 ** Math.floor(Math.log10(raw));
  const step = [1, 2, 5, 10].map((each) => each * power).reduce((best, each) => (Math.abs(Math.log(each / raw)) < Math.abs(Math.log(best / raw)) ? each : best));
  const ticks: number[] = [];
  for (let k = Math.ceil(low / step - 1e-9); k * step <= high + step * 1e-9; k++) ticks.push(Number((k * step).toPrecision(12)));
  return ticks;
}

export function logTicks(low: number, high: number, isNarrow: boolean): number[] {
  const ticks: number[] = [];
  const factors = high / low > (isNarrow ? 50 : 2000) ? [1] : [1, 2, 5];
  for (let power = Math.floor(Math.log10(low)); power <= Math.ceil(Math.log10(high)); power++) {
    for (const factor of factors) {
      const tick = factor * 10 ** power;
      if (tick >= low * 0.999 && tick <= high * 1.001) ticks.push(Number(tick.toPrecision(6)));
    }
  }
  return ticks;
}

export function scaleFor(values: readonly number[], from: number, to: number, isLog: boolean, isPadded: boolean): Scale {
  let low = Math.min(...values);
  let high = Math.max(...values);
  if (low === high) { low -= Math.abs(low) * 0.05 || 0.5; high += Math.abs(high) * 0.05 || 0.5; }
  const pad = isPadded ? (high - low) * 0.06 : 0;
  if (isLog) return { at: (value) => from + ((Math.log(value) - Math.log(low)) / (Math.log(high) - Math.log(low))) * (to - from), ticks: logTicks(low, high, Math.abs(to - from) < 400) };
  low -= pad;
  high += pad;
  return { at: (value) => from + ((value - low) / (high - low)) * (to - from), ticks: linearTicks(low, high, Math.max(3, Math.round(Math.abs(to - from) / (isPadded ? 52 : 85)))) };
}
