/** One change of an assemblage's held set: a solid dropped, held, or exchanged for another. */
import { type Assemblage, exceedance } from "./held-solids";
import type { Kernel } from "./kernel";
import { dependence } from "./solid-ties";

const EXCEEDANCE = 1e-11;
const NEGATIVE = 1e-14;

/** Drops or holds one solid, by the state and amounts at hand: the worst one, or by its index, the first. */
export function nextChange(kernel: Kernel, a: Assemblage, byIndex = false): "changed" | "settled" | "contradiction" {
  const worst = mostNegative(kernel, a, byIndex);
  const next = worst >= 0 && !byIndex ? -1 : mostExceeded(kernel, a, byIndex);
  if (worst >= 0 && !(next >= 0 && next < worst)) { a.isHeld[worst] = 0; return "changed"; }
  if (next < 0) return "settled";
  if (join(kernel, a, next)) return "changed";
  // Another change may yet lift the contradiction where the activity of water counts; where none is left it stands.
  for (let k = 0; k < a.count; k++) {
    if (k === next || a.isHeld[k] || a.isTied[k] || !a.mayHold[k] || !(exceedance(kernel, a, k) > EXCEEDANCE)) continue;
    if (join(kernel, a, k)) return "changed";
  }
  dependence(kernel, a, next);
  a.culprit = next;
  return "contradiction";
}

function mostNegative(kernel: Kernel, a: Assemblage, byIndex: boolean): number {
  const { totals } = kernel.ws;
  let scale = 0;
  for (let j = 0; j < totals.length; j++) if (Number.isFinite(totals[j])) scale += Math.abs(totals[j]);
  let worst = -1;
  let least = -NEGATIVE * scale;
  for (let k = 0; k < a.count; k++) {
    if (a.isHeld[k] && !a.isExcess[k] && a.amounts[k] < least) { least = a.amounts[k]; worst = k; if (byIndex) break; }
  }
  return worst;
}

function mostExceeded(kernel: Kernel, a: Assemblage, byIndex: boolean): number {
  let worst = -1;
  let most = EXCEEDANCE;
  for (let k = 0; k < a.count; k++) {
    if (a.isHeld[k] || a.isTied[k] || !a.mayHold[k]) continue;
    const v = exceedance(kernel, a, k);
    if (v > most) { most = v; worst = k; if (byIndex) break; }
  }
  return worst;
}

/** Holds one more solid, exchanging it for another where they depend; @returns false where none can make room. */
function join(kernel: Kernel, a: Assemblage, next: number): boolean {
  if (!dependence(kernel, a, next)) return true;
  let leaving = -1;
  let least = Infinity;
  for (let k = 0; k < a.count; k++) {
    const use = -a.combination[k];
    if (!a.isHeld[k] || k === next || a.isExcess[k] || !(use > 1e-9)) continue;
    const ratio = Math.max(a.amounts[k], 0) / use;
    if (ratio < least) { least = ratio; leaving = k; }
  }
  a.culprit = next;
  if (leaving < 0) return false;
  a.isHeld[leaving] = 0;
  a.isHeld[next] = 1;
  return true;
}
