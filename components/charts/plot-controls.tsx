"use client";
import { useId, useState, type ReactNode } from "react";
import type { ColumnDescriptor } from "@/lib/schemas/columns";
import type { Waters } from "./plot-data";

/** What is drawn of a job. */
export interface PlotChoice {
  kind: "xy" | "counts";
  x: string; y: string;
  /** One water's curve, the median of all over an axis, or a point for each row. */
  of: "water" | "middle" | "points";
  /** "" for the first one. */
  water: string;
  /** null: as suits the values. */
  isLogX: boolean | null; isLogY: boolean | null;
}

export const isAmount = (column: ColumnDescriptor): boolean => column.type === "number" && column.group !== "row";

interface ControlsProps {
  columns: readonly ColumnDescriptor[]; choice: PlotChoice; waters: Waters;
  /** The scales as drawn. */
  isLogX: boolean; isLogY: boolean;
  onChange: (part: Partial<PlotChoice>) => void;
}

export function PlotControls({ columns, choice, waters, isLogX, isLogY, onChange }: ControlsProps) {
  const options = columns.filter(isAmount).map((column) => <option key={column.name} value={column.name}>{column.name}</option>);
  const isOverAxis = columns.some((column) => column.group === "axis" && column.name === choice.x);
  const isXy = choice.kind === "xy";
  return (
    <div className="flex flex-wrap items-end gap-x-4 gap-y-2">
      <Select label="Chart" value={choice.kind} onChange={(kind) => onChange({ kind: kind as PlotChoice["kind"] })}><option value="xy">one against another</option><option value="counts">counts of one</option></Select>
      <Select label={isXy ? "Upwards" : "Column"} value={choice.y} onChange={(y) => onChange({ y, isLogY: null })}>{options}</Select>
      {isXy && <Select label="Along" value={choice.x} onChange={(x) => onChange({ x, isLogX: null })}>{options}</Select>}
      {isXy && (
        <Select label="Rows" value={isOverAxis ? choice.of : choice.of === "water" ? "water" : "points"} onChange={(of) => onChange({ of: of as PlotChoice["of"] })}>
          <option value="water">one water</option>{isOverAxis && <option value="middle">median of all</option>}<option value="points">each as a point</option>
        </Select>
      )}
      {isXy && choice.of === "water" && <WaterField waters={waters} value={choice.water || waters.names[0] || ""} onChange={(water) => onChange({ water })} />}
      {isXy && (
        <span className="flex min-h-8 items-center gap-3 text-xs">
          <Check label="log along" isOn={isLogX} onChange={(on) => onChange({ isLogX: on })} />
          <Check label="log upwards" isOn={isLogY} onChange={(on) => onChange({ isLogY: on })} />
        </span>
      )}
    </div>
  );
}

const BOX = "min-h-8 max-w-52 rounded border border-faint/75 bg-raised px-1.5";

function Select({ label, value, onChange, children }: { label: string; value: string; onChange: (value: string) => void; children: ReactNode }) {
  const id = useId();
  return (
    <span className="flex min-w-0 flex-col gap-0.5">
      <label htmlFor={id} className="text-xs text-dim">{label}</label>
      <select id={id} value={value} onChange={(event) => onChange(event.target.value)} className={BOX}>{children}</select>
    </span>
  );
}

function Check({ label, isOn, onChange }: { label: string; isOn: boolean; onChange: (isOn: boolean) => void }) {
  return <label className="flex min-h-7 items-center gap-1.5"><input type="checkbox" checked={isOn} onChange={(event) => onChange(event.target.checked)} />{label}</label>;
}

/** A list where it holds every water; of a larger job the id is typed, taken with Enter or on leaving. */
function WaterField({ waters, value, onChange }: { waters: Waters; value: string; onChange: (water: string) => void }) {
  const id = useId();
  const [typed, setTyped] = useState<string | null>(null);
  if (waters.isWhole) return <Select label="Water" value={value} onChange={onChange}>{waters.names.map((name) => <option key={name} value={name}>{name}</option>)}</Select>;
  const take = (): void => { if (typed !== null && typed.trim()) onChange(typed.trim()); setTyped(null); };
  return (
    <span className="flex min-w-0 flex-col gap-0.5">
      <label htmlFor={id} className="text-xs text-dim">Water</label>
      <input id={id} list={`${id}-names`} value={typed ?? value} onChange={(event) => setTyped(event.target.value)} onBlur={take} onKeyDown={(event) => { if (event.key === "Enter" && !event.nativeEvent.isComposing) take(); }} autoComplete="off" spellCheck={false} className={BOX} />
      <datalist id={`${id}-names`}>{waters.names.map((name) => <option key={name} value={name} />)}</datalist>
    </span>
  );
}
