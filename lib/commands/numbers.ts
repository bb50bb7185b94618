/** Numbers as the console shows them: enough figures to work with, no more than the method bears. */

const SUPERSCRIPTS = "⁰¹²³⁴⁵⁶⁷⁸⁹";
const raised = (exponent: number): string => (exponent < 0 ? "⁻" : "") + [...String(Math.abs(exponent))].map((digit) => SUPERSCRIPTS[Number(digit)]).join("");

/** Significant figures with a real minus; powers of ten beyond 10⁻⁴ and 10⁶. "–" for what does not exist. */
export function significant(value: unknown, figures = 4): string {
  if (typeof value !== "number" || !Number.isFinite(value)) return "–";
  if (value === 0) return "0";
  const size = Math.abs(value);
  if (size < 1e-4 || size >= 1e6) {
    const [mantissa, exponent] = value.toExponential(figures - 1).split("e");
    return `${mantissa.replace("-", "−")} × 10${raised(Number(exponent))}`;
  }
  const decimals = Math.max(0, figures - 1 - Math.floor(Math.log10(size)));
  return value.toFixed(Math.min(decimals, 8)).replace("-", "−");
}

/** Fixed decimals with a real minus; never "−0.00". */
export function fixed(value: unknown, decimals: number): string {
  if (typeof value !== "number" || !Number.isFinite(value)) return "–";
  const text = value.toFixed(decimals);
  return (Number(text) === 0 ? text.replace("-", "") : text).replace("-", "−");
}

/** With a sign always, for differences, indices and balances. */
export const signed = (value: unknown, decimals: number): string => {
  const text = fixed(value, decimals);
  return typeof value === "number" && Number(value.toFixed(decimals)) > 0 ? `+${text}` : text;
};

/** Whole numbers in groups of three, set apart by thin spaces. */
export const grouped = (value: number): string => value.toLocaleString("en").replaceAll(",", " ");
