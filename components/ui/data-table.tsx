import type { ReactNode, Ref } from "react";

export interface TableColumn<T> {
  title: string;
  isRight?: boolean;
  /** Classes of the column's cells. */
  className?: string;
  cell: (item: T) => ReactNode;
}

/** A plain table that scrolls in its own box on narrow screens. */
export function DataTable<T>({ label, columns, items, keyOf, empty, regionRef }: { label: string; columns: readonly TableColumn<T>[]; items: readonly T[]; keyOf: (item: T) => string | number; empty: ReactNode; regionRef?: Ref<HTMLDivElement> }) {
  if (items.length === 0) return <p className="rounded border border-dashed border-line px-4 py-6 text-sm text-dim">{empty}</p>;
  return (
    <div ref={regionRef} role="region" aria-label={label} tabIndex={0} className="relative overflow-x-auto">
      <table className="w-full text-sm">
        <thead>
          <tr className="border-b border-line text-left text-xs text-dim">
            {columns.map((column) => <th key={column.title} scope="col" className={`whitespace-nowrap py-1.5 pr-4 font-normal ${column.isRight ? "text-right" : ""}`}>{column.title || <span className="sr-only">what can be done</span>}</th>)}
          </tr>
        </thead>
        <tbody>
          {items.map((item) => (
            <tr key={keyOf(item)} className="border-b border-line/50 align-baseline hover:bg-raised">
              {columns.map((column) => <td key={column.title} className={`py-1.5 pr-4 ${column.isRight ? "whitespace-nowrap text-right tabular-nums" : ""} ${column.className ?? ""}`}>{column.cell(item)}</td>)}
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}
