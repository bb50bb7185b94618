import { type ColumnDescriptor, LEADING_COLUMNS } from "@/lib/schemas/columns";

/** An axis as a result row sees it: the field varied and the unit its values are shown in. */
export interface AxisName { field: string; unit: string }

/** water and case stand before the axes, status and the others after them. */
const COLUMNS_BEFORE_AXES = 2;

/**
 * All columns of a job's rows in order: water, case, axes, status, message, warnings, iterations, residual, values.
 * An axis column bears the name of its field, or `vary:<field>` where another column has that name already
 * (an axis over pCO2 with pCO2 reported): the reported quantity keeps its plain name.
 */
export function resultColumns(axes: readonly AxisName[], values: readonly ColumnDescriptor[]): ColumnDescriptor[] {
  const taken = new Set([...LEADING_COLUMNS, ...values].map((column) => column.name));
  const axisColumns = axes.map((axis): ColumnDescriptor => ({
    name: taken.has(axis.field) ? `vary:${axis.field}` : axis.field,
    type: "number", unit: axis.unit, basis: null, description: `Value of the axis over ${axis.field}`, group: "axis",
  }));
  return [...LEADING_COLUMNS.slice(0, COLUMNS_BEFORE_AXES), ...axisColumns, ...LEADING_COLUMNS.slice(COLUMNS_BEFORE_AXES), ...values];
}
