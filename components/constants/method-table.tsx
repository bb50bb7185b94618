import { DataTable, type TableColumn } from "@/components/ui/data-table";
import type { ConstantsTable } from "@/lib/schemas/api";

type Method = ConstantsTable["methods"][number];

const COLUMNS: readonly TableColumn<Method>[] = [
  { title: "method", className: "whitespace-nowrap", cell: (method) => method.name },
  { title: "formula", cell: (method) => method.formula },
  { title: "range", cell: (method) => method.range },
  { title: "source", className: "text-xs", cell: (method) => <>{method.source}{method.fromMemory && <span className="text-warn"> From memory.</span>}</> },
];

/** Models and formulas that are no single constant, with their ranges and sources. */
export function MethodTable({ methods }: { methods: readonly Method[] }) {
  return <DataTable label="Methods" columns={COLUMNS} items={methods} keyOf={(method) => method.name} empty="None." />;
}
