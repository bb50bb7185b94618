import { memo, type ReactNode } from "react";

/** A chemical formula inside running text: element symbols with counts, groups, and a charge behind a caret. */
const FORMULA = /(?<![A-Za-z0-9/])(?:(?:[A-Z][a-z]?\d*|\((?:[A-Z][a-z]?\d*)+\)\d*)+\^\d*[+-]|p?(?:CO2|H2O|HCO3|CO3|SO4|NO3|NO2|NH4|NH3|PO4|SiO2|SiO4|H2SO4|CaCO3|H4SiO4|MgCO3|CaSO4|MgSO4|NaHCO3|SrCO3|H3PO4|Al\(OH\)3|AlF3))(?![a-z0-9])/g;

function formula(text: string, key: number): ReactNode {
  const [body, charge] = text.split("^");
  const parts = body.split(/(\d+)/).map((part, index) => (index % 2 === 1 ? <sub key={index}>{part}</sub> : part));
  return (
    <span key={key} className="whitespace-nowrap">
      {parts}{charge && <sup>{charge.replace("-", "−")}</sup>}
    </span>
  );
}

/** Text with every formula in it set properly. Copying gives the plain letters back. */
export const FormulaText = memo(function FormulaText({ children }: { children: string }) {
  const parts: ReactNode[] = [];
  let at = 0;
  for (const match of children.matchAll(FORMULA)) {
    if (match.index > at) parts.push(children.slice(at, match.index));
    parts.push(formula(match[0], match.index));
    at = match.index + match[0].length;
  }
  if (at < children.length) parts.push(children.slice(at));
  return <>{parts}</>;
});

/** A reaction or a bare formula, every count in it set as one: "CaSO4·2H2O = Ca^2+ + SO4^2- + 2 H2O". */
export function ReactionText({ children }: { children: string }) {
  return <>{children.split(" ").map((term, index) => <span key={index}>{index > 0 && " "}{/^(\d+|[=+])$/.test(term) ? term : reactant(term)}</span>)}</>;
}

function reactant(term: string): ReactNode {
  const [body, charge] = term.split("^");
  return (
    <span className="whitespace-nowrap">
      {body.split(/(?<=[A-Za-z)])(\d+)/).map((part, index) => (index % 2 === 1 ? <sub key={index}>{part}</sub> : part))}{charge && <sup>{charge.replace("-", "−")}</sup>}
    </span>
  );
}
