/** Checks of analyses on their way in: findings for a person to look at, which never alter or refuse data. */
import { ANALYTES } from "@/lib/chemistry/data";
import { resolveWater } from "@/lib/chemistry/resolve-water";
import type { ResolvedWater } from "@/lib/chemistry/types";
import type { Issue } from "@/lib/errors";

/** Charge of organic acids in a near-neutral water, eq per mg C: most of 8.6 µeq of sites (Hruška et al. 2003) are dissociated. */
const ORGANIC_CHARGE = 6e-6;
/** What a complete analysis has; without one of them no ion balance can be judged. */
const MAJORS = ["Ca", "Mg", "Na", "Cl", "SO4"] as const;
/** A conductivity further than this from the ions' own points at a unit. */
const CONDUCTIVITY_FACTOR = 1.35;
/** Sum of equivalents to conductivity in a dilute to moderate water, µS/cm per meq/L of cations or anions (common practice, no source). */
const MICROSIEMENS_PER_MILLIEQUIVALENT = 100;

/**
 * Findings by row: pointers are "/<row>" or "/<row>/<column>".
 * @param rows as in `waters.rows`. @param units default unit per column.
 */
export function checkWaters(rows: readonly Readonly<Record<string, unknown>>[], units: Readonly<Record<string, string>> = {}): Issue[] {
  return rows.flatMap((row, index) => {
    const water = resolveWater(row, index, units, "half");
    const at = (column: string | null): string => (column === null ? `/${index}` : `/${index}/${column}`);
    return [
      ...water.faults.map((fault) => ({ pointer: at(fault.column), code: fault.code, message: sentence(fault.message) })),
      ...conditionIssues(water).map(({ column, ...issue }) => ({ pointer: at(column), ...issue })),
      ...balanceIssues(water).map((issue) => ({ pointer: at(null), ...issue })),
    ];
  });
}

const sentence = (text: string): string => (text.endsWith(".") ? text : `${text}.`);

interface Finding { column: string | null; code: string; message: string }

function conditionIssues(water: ResolvedWater): Finding[] {
  const findings: Finding[] = [];
  if (water.temperature === null) findings.push({ column: null, code: "no-temperature", message: "No temperature: a case or an axis will have to give one." });
  else if (water.temperature < 0 || water.temperature > 40) findings.push({ column: "temperature", code: "unusual-temperature", message: `A temperature of ${water.temperature} °C is unusual for a natural water.` });
  if (water.pH !== null && (water.pH < 3 || water.pH > 11)) findings.push({ column: "pH", code: "unusual-pH", message: `A pH of ${water.pH} is unusual for a natural water.` });
  return findings;
}

interface Balance { cations: number; anions: number }

/** Equivalents of the analysis as given, eq/kg: the alkalinity stands for the weak anions, DOC for the organic ones. */
function balanceOf(water: ResolvedWater): Balance {
  const balance = { cations: 0, anions: 0 };
  for (const { key, strongCharge } of ANALYTES) {
    const equivalents = (water.totals[key] ?? 0) * Math.abs(strongCharge);
    if (strongCharge > 0) balance.cations += equivalents; else balance.anions += equivalents;
  }
  if (water.pH !== null) balance.cations += 10 ** -water.pH;
  // Labile aluminium of acid waters carries about two charges (common practice, no source).
  if (water.pH !== null && water.pH < 5.5) balance.cations += 2 * (water.totals.Al ?? 0);
  const alkalinity = water.alkalinity ?? water.ANC ?? 0;
  if (alkalinity > 0) balance.anions += alkalinity;
  balance.anions += (water.DOC ?? 0) * ORGANIC_CHARGE;
  return balance;
}

/** Acceptance of an ion balance by the sum of anions, meq/L (Standard Methods 1030 E, from memory). */
function isAcceptable({ cations, anions }: Balance): boolean {
  const difference = Math.abs(cations - anions);
  if (anions < 3e-3) return difference <= 0.2e-3;
  return 100 * difference / (cations + anions) <= (anions < 10e-3 ? 2 : 5);
}

function balanceIssues(water: ResolvedWater): { code: string; message: string }[] {
  const absent = MAJORS.filter((key) => water.totals[key] === undefined);
  if (absent.length > 0) {
    // A water given by pH and alkalinity alone is no unfinished analysis.
    return absent.length <= 3 ? [{ code: "incomplete", message: `${absent.join(", ")} ${absent.length > 1 ? "are" : "is"} not given, so the ion balance cannot be judged; electroneutrality refuses the water unless missing values count as zero.` }] : [];
  }
  if (water.alkalinity === null && water.ANC === null && !(water.pH !== null && water.pH < 4.5)) return [];
  const balance = balanceOf(water);
  const findings: { code: string; message: string }[] = [];
  if (!isAcceptable(balance)) {
    const percent = 100 * (balance.cations - balance.anions) / (balance.cations + balance.anions);
    findings.push({ code: "ion-balance", message: `Poor ion balance: ${percent.toFixed(1)} % of the sum (cations ${meq(balance.cations)}, anions ${meq(balance.anions)} meq/L). ${percent > 0 ? "Anions" : "Cations"} are missing or too low, or a unit is wrong.` });
  }
  const expected = MICROSIEMENS_PER_MILLIEQUIVALENT * 1000 * (balance.cations + balance.anions) / 2;
  if (water.conductivity !== null && expected > 50) {
    const ratio = expected / water.conductivity;
    if (ratio > CONDUCTIVITY_FACTOR || ratio < 1 / CONDUCTIVITY_FACTOR) findings.push({ code: "conductivity", message: `The measured conductivity, ${water.conductivity} µS/cm, does not go with the ions, which suggest about ${expected.toFixed(0)} µS/cm.` });
  }
  return findings;
}

const meq = (equivalents: number): string => (equivalents * 1000).toFixed(2);
