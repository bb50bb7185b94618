/** Scales of charts: from values to pixels, and the round values that are marked. Pure; shared by every chart. */
import { significant } from "@/lib/commands/numbers";

export interface Scale {
  at(value: number): number;
  ticks: number[];
  isLog: boolean;
}

const HUGE = 1e300;

/** Smallest and largest finite value, drawn apart where they are the same; null without any. */
export function extentOf(values: readonly number[], isLog = false): { low: number; high: number } | null {
  let low = Infinity;
  let high = -Infinity;
  for (const value of values) {
    if (!Number.isFinite(value) || (isLog && value <= 0)) continue;
    if (value < low) low = value;
    if (value > high) high = value;
  }
  if (low > high) return null;
  // Their distance must be a double too; a picture of numbers beyond this size is none anyway.
  if (!isLog) { low = Math.max(low, -HUGE); high = Math.min(high, HUGE); }
  // Closer than this, the ticks between them could not be told apart in a double.
  if (high - low > 1e-9 * Math.max(Math.abs(low), Math.abs(high))) return { low, high };
  return { low: low - (Math.abs(low) * 0.05 || 0.5), high: high + (Math.abs(high) * 0.05 || 0.5) };
}

/** The round number, 1, 2 or 5 times a power of ten, nearest to a size. */
export function roundStep(raw: number): number {
  const power = 10 ** Math.floor(Math.log10(raw));
  return [1, 2, 5, 10].map((each) => each * power).reduce((best, each) => (Math.abs(Math.log(each / raw)) < Math.abs(Math.log(best / raw)) ? each : best));
}

/** Ticks are few; a count beyond this is a fault of the numbers, and the page must not hang on it. */
const MOST_TICKS = 200;

/** Round steps of 1, 2 or 5 times a power of ten, about `count` of them. */
export function linearTicks(low: number, high: number, count: number): number[] {
  const step = roundStep((high - low) / count);
  const ticks: number[] = [];
  for (let k = Math.ceil(low / step - 1e-9); k * step <= high + step * 1e-9 && ticks.length < MOST_TICKS; k++) ticks.push(Number((k * step).toPrecision(12)) + 0);
  return ticks;
}

/** Pixels a decade needs for ticks at 2 and 5 too, and for its own alone. */
const ROOMY_DECADE = 120;
const NARROW_DECADE = 50;

/** Powers of ten, with 2 and 5 between them where there is room; every second or third power of a very long axis. @param pixels length of the axis */
export function logTicks(low: number, high: number, pixels: number): number[] {
  const ticks: number[] = [];
  // The difference of logarithms, not the logarithm of a quotient that may leave the doubles.
  const perDecade = pixels / (Math.log10(high) - Math.log10(low));
  const factors = perDecade < ROOMY_DECADE ? [1] : [1, 2, 5];
  const stride = Math.max(1, Math.ceil(NARROW_DECADE / perDecade));
  for (let power = Math.floor(Math.log10(low)); power <= Math.ceil(Math.log10(high)); power++) {
    if (power % stride !== 0) continue;
    for (const factor of factors) {
      const tick = Number(`${factor}e${power}`);
      if (tick >= low * 0.999 && tick <= high * 1.001) ticks.push(tick);
    }
  }
  return ticks;
}

const PAD = 0.06;

/** A scale from values to the pixels between `from` and `to`. @param isPadded leaves air beyond the outermost values. */
export function scaleFor(values: readonly number[], from: number, to: number, isLog: boolean, isPadded: boolean): Scale {
  const { low, high } = extentOf(values, isLog) ?? (isLog ? { low: 1, high: 10 } : { low: 0, high: 1 });
  const pad = isPadded ? PAD : 0;
  const wanted = Math.max(3, Math.round(Math.abs(to - from) / (isPadded ? 52 : 85)));
  if (isLog) {
    const room = 10 ** ((Math.log10(high) - Math.log10(low)) * pad);
    const first = Math.max(Number.MIN_VALUE, low / room);
    const last = Math.min(Number.MAX_VALUE, high * room);
    const span = Math.log(last) - Math.log(first);
    const ticks = logTicks(first, last, Math.abs(to - from));
    // Less than a step of 1-2-5 wide: the axis is as good as linear.
    return { isLog, at: (value) => from + ((Math.log(value) - Math.log(first)) / span) * (to - from), ticks: ticks.length > 1 ? ticks : linearTicks(first, last, wanted) };
  }
  const [first, last] = [low - pad * (high - low), high + pad * (high - low)];
  return { isLog, at: (value) => from + ((value - first) / (last - first)) * (to - from), ticks: linearTicks(first, last, wanted) };
}

/** A tick in figures: as short as it can be, with a real minus. */
export function tickLabel(tick: number): string {
  const size = Math.abs(tick);
  if (tick === 0) return "0";
  if (size >= 1e-4 && size < 1e6) return String(Number(tick.toPrecision(6))).replace("-", "−");
  return significant(tick, 3).replace(/(\.\d*?)0+(?= )/, "$1").replace(/\.(?= )/, "").replaceAll(" ", "").replace(/^(−?)1×/, "$1");
}
