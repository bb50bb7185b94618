import { type CellColumn, numberText } from "../cells";
import type { ColumnDescriptor } from "@/lib/schemas/columns";
import { type MakeFormat, utf8 } from "./format";

/** Writes rows as JSON objects keyed by column name, one after the other with `between` after each. */
function objectWriter(columns: readonly ColumnDescriptor[]) {
  const keys = columns.map((column, index) => `${index === 0 ? "{" : ","}${JSON.stringify(column.name)}:`);
  return (cells: readonly CellColumn[], row: number): string => {
    let text = "";
    for (let column = 0; column < cells.length; column++) {
      const { kind, data } = cells[column];
      text += keys[column];
      if (kind === "text") text += JSON.stringify(data[row]);
      else text += Number.isFinite(data[row]) ? numberText(data[row]) : "null";
    }
    return `${text}}`;
  };
}

/** One JSON object a line; null for missing. */
export const ndjsonFormat: MakeFormat = (columns) => {
  const write = objectWriter(columns);
  return {
    start: () => utf8(""),
    rows(cells, count) {
      let text = "";
      for (let row = 0; row < count; row++) text += `${write(cells, row)}\n`;
      return utf8(text);
    },
    end: () => utf8(""),
  };
};

/** One document: job, columns, rows. A cut download is not JSON, so it cannot pass for a whole one. */
export const jsonFormat: MakeFormat = (columns, provenance) => {
  const write = objectWriter(columns);
  const { jobId: id, status, specHash, engineVersion, constantsVersion, rowCount, firstRow } = provenance;
  let first = true;
  return {
    start() {
      const head = JSON.stringify({ job: { id, status, specHash, engineVersion, constantsVersion }, columns, rowCount, firstRow });
      return utf8(`${head.slice(0, -1)},"rows":[`);
    },
    rows(cells, count) {
      let text = "";
      for (let row = 0; row < count; row++) {
        text += `${first ? "\n" : ",\n"}${write(cells, row)}`;
        first = false;
      }
      return utf8(text);
    },
    end: () => utf8("\n]}\n"),
  };
};
