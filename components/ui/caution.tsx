/** Stands wherever a result could guide a dose, a supply or a permit. */
export function Caution({ className = "" }: { className?: string }) {
  return <p className={`text-xs text-dim ${className}`}>An estimate under the stated assumptions; confirm by measurement. Local codes and licensed practice decide.</p>;
}
