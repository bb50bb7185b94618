/** Starting points for a spec. Each is complete and passes the checker (a test sees to it). */

const ROWS = [
  {
    id: "QB-UW", site: "Quern Beck, Upper Weir", date: "2026-10-14", temperature: 8.4, pH: 7.9,
    Ca: "62.1 mg/L", Mg: "6.3 mg/L", Na: "4.8 mg/L", K: "1.2 mg/L", Cl: "12.4 mg/L", SO4: "29 mg/L", NO3: "1.4 mg/L as N", alkalinity: "2.71 meq/L",
  },
];

const OPEN = { name: "open to air, no solid", close: ["charge", "pCO2"], pCO2: "420 ppm", activity: "davies" };
const CALCITE = { name: "with calcite", like: "open to air, no solid", react: { gas: "open", solids: { calcite: { supply: "excess" } } } };

export interface Template { id: string; title: string; says: string; make(set: { id: string; name: string } | null): unknown }

export const TEMPLATES: readonly Template[] = [
  {
    id: "open", title: "Open to air", says: "what pH the ions imply under the air",
    make: () => ({ spec: 1, title: "Open to air", waters: { rows: ROWS }, cases: [OPEN], report: ["pH", "ANC", "alkalinity", "pCO2", "balanceError", "SI"] }),
  },
  {
    id: "calcite", title: "Without and with calcite", says: "two cases of one water, side by side",
    make: () => ({ spec: 1, title: "Without and with calcite", waters: { rows: ROWS }, cases: [OPEN, CALCITE], report: ["pH", "ANC", "conservedANC", "pCO2", "SI", "solids"] }),
  },
  {
    id: "axis", title: "Over a range of pCO2", says: "from air to soil gas, 41 points",
    make: () => ({
      spec: 1, title: "From air to soil gas", waters: { rows: ROWS }, cases: [{ name: "open", close: ["charge", "pCO2"] }, { name: "with calcite", like: "open", react: { gas: "open", solids: { calcite: { supply: "excess" } } } }],
      vary: [{ field: "pCO2", from: "200 ppm", to: "20000 ppm", points: 41, scale: "log" }], report: ["pH", "ANC", "alkalinity", "SI", "solids"],
    }),
  },
  {
    id: "set", title: "Over a sample set", says: "every water of a stored set",
    make: (set) => ({
      spec: 1, title: set ? `${set.name}, as measured` : "A sample set, as measured", waters: { set: set?.id ?? "set_…", missing: "zero" },
      cases: [{ name: "as measured", close: ["pH", "alkalinity"] }], report: ["pH", "ANC", "alkalinity", "pCO2", "balanceError", "conductivity", "SI"],
    }),
  },
];

/** JSON the way the editor lays it out: short objects on one line, so that a water or case reads as one. */
export function layOut(value: unknown, indent = ""): string {
  const flat = flatText(value);
  if (flat.length + indent.length <= 96) return flat;
  const inner = `${indent}  `;
  if (Array.isArray(value)) return `[\n${value.map((each) => inner + layOut(each, inner)).join(",\n")}\n${indent}]`;
  if (typeof value === "object" && value !== null) {
    return `{\n${Object.entries(value).map(([key, each]) => `${inner}${JSON.stringify(key)}: ${layOut(each, inner)}`).join(",\n")}\n${indent}}`;
  }
  return flat;
}

function flatText(value: unknown): string {
  if (Array.isArray(value)) return `[${value.map(flatText).join(", ")}]`;
  if (typeof value === "object" && value !== null) {
    const members = Object.entries(value).map(([key, each]) => `${JSON.stringify(key)}: ${flatText(each)}`);
    return members.length === 0 ? "{}" : `{ ${members.join(", ")} }`;
  }
  return JSON.stringify(value) ?? "null";
}
