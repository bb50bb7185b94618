/**
 * Cold starts. Every component at its total; hydrogen from the two or three terms that usually carry its balance, so that the
 * start lies within a pH unit or two of the answer and never depends on an earlier row.
 */
import { CARBON, CLOSURE, type Closure, HYDROGEN, type Kernel } from "./kernel";

/** What a start needs to know: the closure, the components present, and ln a(H), ln a(CO2) where held (else NaN). */
export interface StartPlan { closure: Closure; present: Uint8Array; xH: number; xC: number }

/** Rough constants at 25 °C, enough for a start: K1, K2 of carbonic acid and Kw. */
export const ROUGH_K1 = 4.5e-7;
export const ROUGH_K2 = 4.7e-11;
const ROUGH_KW = 1e-14;
/** Concentration assumed for a component that only a solid or the gas supplies. */
export const SUPPLIED = 1e-5;

/** Fills `ws.x`, `ws.ionicStrength` and `ws.soluteSum` from `ws.totals`. */
export function coldStart(kernel: Kernel, plan: StartPlan): void {
  const { closure, present, xH, xC } = plan;
  const { tableau, ws } = kernel;
  const n = tableau.componentCount;
  let strength = 0;
  let sum = 0;
  for (let j = 2; j < n; j++) {
    if (!present[j]) continue;
    const total = ws.totals[j] > 0 ? ws.totals[j] : SUPPLIED;
    ws.x[j] = Math.log(total);
    const z = tableau.componentCharge[j];
    strength += 0.5 * z * z * total;
    sum += total;
  }
  const knowsTotal = closure === CLOSURE.balanceTotal || closure === CLOSURE.pHTotal || closure === CLOSURE.gasTotal;
  const carbon = present[CARBON] && knowsTotal ? ws.totals[CARBON] : 0;
  const gas = Number.isNaN(xC) ? (carbon > 0 || !present[CARBON] ? NaN : SUPPLIED) : Math.exp(xC);
  // Bases to be balanced by carbonate and hydroxide; aluminium's hydrolysis takes up to three per atom of it.
  const base = Number.isNaN(ws.totals[HYDROGEN]) ? 0 : -ws.totals[HYDROGEN];
  // A balance next to nothing would ask for hydrogen without bound: no acid there is beyond what the carbon gives off.
  const h = Math.min(Math.max(guessHydrogen(base, gas, carbon), 1e-16), Math.max(Math.sqrt(ROUGH_K1 * Math.max(carbon, gas || 0)), -base, 1e-7));
  ws.x[HYDROGEN] = Number.isNaN(xH) ? Math.log(h) : xH;
  ws.x[CARBON] = Number.isNaN(xC) ? Math.log(carbon > 0 ? carbon : SUPPLIED) : xC;
  ws.ionicStrength = Math.min(Math.max(strength + 0.5 * Math.abs(base), 1e-7), 2);
  ws.soluteSum = Math.min(sum + Math.abs(base) + 1e-7, 5);
}

function guessHydrogen(base: number, gas: number, carbon: number): number {
  if (base <= 0) return Math.max(-base, 1e-7);
  if (gas > 0) return Math.max(ROUGH_K1 * gas / base, Math.sqrt(2 * ROUGH_K1 * ROUGH_K2 * gas / base), ROUGH_KW / base);
  if (base < carbon) return Math.max(ROUGH_K1 * (carbon - base) / base, ROUGH_K2);
  if (base < 2 * carbon) return Math.max(ROUGH_K2 * (2 * carbon - base) / Math.max(base - carbon, 1e-9), ROUGH_KW / base);
  return ROUGH_KW / base;
}
