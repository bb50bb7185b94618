/**
 * Printed reactions rewritten over the components: each formed species' own reaction is solved for the species, after the others in
 * it, so that an override of one printed constant reaches everything built on it.
 */
export interface Reaction { name: string; reaction: Record<string, number> }

/** ln a of something = Σ nu·x + water·ln a_w + ln 10·Σ logK factor·log K of printed reactions (index, factor). */
export interface Combination { nu: Float64Array; water: number; logK: [number, number][] }

export interface Basis {
  components: readonly string[];
  forms: Map<string, Combination>;
}

/** @throws Error where a reaction names nothing known or goes round in a circle: a fault of the data files. */
export function makeBasis(components: readonly string[], formed: readonly Reaction[]): Basis {
  const basis: Basis = { components, forms: new Map() };
  components.forEach((name, j) => {
    const nu = new Float64Array(components.length);
    nu[j] = 1;
    basis.forms.set(name, { nu, water: 0, logK: [] });
  });
  const byName = new Map(formed.map((r, k) => [r.name, { ...r, index: k }]));
  const underWay = new Set<string>();
  const form = (name: string): Combination => {
    const known = basis.forms.get(name);
    if (known) return known;
    const own = byName.get(name);
    if (!own) throw new Error(`constants set: ${name} stands in a reaction but is no species`);
    if (underWay.has(name)) throw new Error(`constants set: the reactions of ${name} go round in a circle`);
    underWay.add(name);
    const { [name]: count, ...others } = own.reaction;
    if (!count) throw new Error(`constants set: the reaction of ${name} does not contain it`);
    // Σ ν log a = log K, solved for the species.
    for (const other of Object.keys(others)) if (other !== "H2O") form(other);
    const rest = combine(basis, others);
    const result: Combination = {
      nu: rest.nu.map((v) => (v === 0 ? 0 : -v / count)), water: rest.water === 0 ? 0 : -rest.water / count,
      logK: [[own.index, 1 / count], ...rest.logK.map(([k, f]): [number, number] => [k, -f / count])],
    };
    basis.forms.set(name, result);
    return result;
  };
  for (const r of formed) form(r.name);
  return basis;
}

/** Σ count·ln a of the terms of a reaction, over the components. */
export function combine(basis: Basis, reaction: Record<string, number>): Combination {
  const nu = new Float64Array(basis.components.length);
  let water = 0;
  const logK = new Map<number, number>();
  for (const [name, count] of Object.entries(reaction)) {
    if (name === "H2O") { water += count; continue; }
    const form = basis.forms.get(name);
    if (!form) throw new Error(`constants set: ${name} stands in a reaction but is no species`);
    for (let j = 0; j < nu.length; j++) nu[j] += count * form.nu[j];
    water += count * form.water;
    for (const [k, f] of form.logK) logK.set(k, (logK.get(k) ?? 0) + count * f);
  }
  return { nu, water, logK: [...logK].filter(([, f]) => f !== 0) };
}
