"use client";
import { FormulaText } from "@/components/ui/formula-text";
import { Keycaps } from "./keycaps";

const EXAMPLES: readonly { line: string; says: string }[] = [
  { line: "Ca 62 mg/L, alkalinity 2.71 meq/L, pH 7.9, 8.4 °C", says: "the state of a beck water" },
  { line: "Ca 9.5 mg/L, Mg 1.4 mg/L, Na 5.2 mg/L, K 0.6 mg/L, Cl 8.1 mg/L, SO4 7.4 mg/L, NO3 0.3 mg/L as N, DOC 12 mg/L, pCO2 800 ppm, 11 °C", says: "a brown stream, settled by its ions" },
  { line: "ANC 1500 µeq/L, pCO2 420 ppm, 10 °C", says: "the weak-acid side alone" },
];

/** What stands in an empty stream. */
export function Welcome({ onTry }: { onTry: (line: string) => void }) {
  return (
    <section className="px-4 py-8" aria-label="Getting started">
      <h1 className="text-lg text-ink">Type a water.</h1>
      <p className="mt-1 max-w-prose text-sm leading-6 text-dim">
        Analytes with numbers and units, the way you would dictate them. Enter gives pH, ANC, CO<sub>2</sub> and saturation; then
        ask what happens with calcite, open to the air, at another temperature.
      </p>
      <ul className="mt-4 space-y-2">
        {EXAMPLES.map(({ line, says }) => (
          <li key={line}>
            <button type="button" onClick={() => onTry(line)} className="min-h-7 max-w-full text-left text-sm text-accent underline-offset-4 hover:underline"><FormulaText>{line}</FormulaText></button>
            <span className="block text-xs text-dim">{says}</span>
          </li>
        ))}
      </ul>
      <p className="mt-5 text-xs text-dim">All commands<Keycaps combo="F1" /> <span className="ml-3">Everything<Keycaps combo="Mod+K" /></span></p>
    </section>
  );
}
