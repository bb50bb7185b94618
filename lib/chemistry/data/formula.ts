/** Formulas and reactions in plain text: what the data files are written in. */
import { ATOMIC_MASSES } from "./atomic-masses";

type Masses = Readonly<Record<string, number>>;

const STATE = /\((?:aq|g)\)$/;
const CHARGE = /\^(\d*)([+-])$/;

/** Charge of "Ca^2+", "HCO3^-", "CO2(aq)": +2, −1, 0. */
export function chargeOf(name: string): number {
  const match = CHARGE.exec(name);
  return match ? Number(match[1] || 1) * (match[2] === "+" ? 1 : -1) : 0;
}

/**
 * Atoms of a formula: groups ("Al(OH)3"), hydrates ("CaSO4·2H2O"), charge and state ("CO2(aq)") are understood.
 * @returns null where the text is no formula of known elements.
 */
export function compositionOf(formula: string, masses: Masses = ATOMIC_MASSES): Record<string, number> | null {
  const atoms: Record<string, number> = {};
  for (const part of formula.replace(CHARGE, "").replace(STATE, "").split(/[·*]/)) {
    const [, times, body] = /^(\d*)(.*)$/.exec(part)!;
    if (!addAtoms(atoms, body, Number(times || 1), masses)) return null;
  }
  return Object.keys(atoms).length > 0 ? atoms : null;
}

function addAtoms(atoms: Record<string, number>, body: string, times: number, masses: Masses): boolean {
  let rest = body;
  while (rest) {
    const group = /^\(([^()]+)\)(\d*)/.exec(rest);
    const atom = group ? null : /^([A-Z][a-z]?)(\d*)/.exec(rest);
    if (group) {
      if (!addAtoms(atoms, group[1], times * Number(group[2] || 1), masses)) return false;
      rest = rest.slice(group[0].length);
    } else if (atom && Object.hasOwn(masses, atom[1])) {
      atoms[atom[1]] = (atoms[atom[1]] ?? 0) + times * Number(atom[2] || 1);
      rest = rest.slice(atom[0].length);
    } else return false;
  }
  return true;
}

/** g/mol, or null where the text is no formula of known elements. */
export function molarMassOf(formula: string, masses: Masses = ATOMIC_MASSES): number | null {
  const atoms = compositionOf(formula, masses);
  return atoms ? Object.entries(atoms).reduce((sum, [element, count]) => sum + count * masses[element], 0) : null;
}

/** "H^+ + 2 F^- = HF2^-" as signed counts, products positive. The name of a solid may be left out of its own dissolution. */
export function readReaction(text: string): Record<string, number> {
  const terms: Record<string, number> = {};
  text.split(" = ").forEach((side, index) => {
    for (const term of side.split(" + ")) {
      const [, count, name] = /^(?:(\d+) )?(.+)$/.exec(term.trim())!;
      terms[name] = (terms[name] ?? 0) + Number(count ?? 1) * (index === 0 ? -1 : 1);
    }
  });
  return terms;
}
