/** log K over temperature from the figures as printed. */
import type { LogKOverT, Source } from "./types";

const KILOJOULES_PER_KILOCALORIE = 4.184;

export type PrintedLogK = LogKOverT & Source;

/** Published analytic form: [a, b, c, d, e] of log K = a + b·T + c/T + d·log10 T + e/T², T in kelvin. */
export function analytic(logK25: number, [a, bT, cOverT, dLog10T, eOverT2]: [number, number, number, number, number], source: Source): PrintedLogK {
  return { form: "analytic", a, bT, cOverT, dLog10T, eOverT2, logK25, ...source };
}

/** From log K at 25 °C and the reaction enthalpy in kcal/mol, as the source prints it. */
export function vantHoff(logK25: number, kilocalories: number, source: Source): PrintedLogK {
  return { form: "vantHoff", logK25, reactionEnthalpy: kilocalories * KILOJOULES_PER_KILOCALORIE, ...source };
}
