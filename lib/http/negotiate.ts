import { AppError } from "@/lib/errors";

export type ResultFormat = "json" | "ndjson" | "csv" | "arrow";

const TYPES: Record<string, ResultFormat> = {
  "application/json": "json", "application/x-ndjson": "ndjson", "application/ndjson": "ndjson", "text/csv": "csv",
  "application/vnd.apache.arrow.stream": "arrow", "*/*": "json", "application/*": "json", "text/*": "csv",
};

/** The format of results: `?format=` wins, then the Accept header by its weights, JSON without either. Throws `not-acceptable`. */
export function resultFormat(asked: ResultFormat | undefined, accept: string | null): ResultFormat {
  if (asked) return asked;
  if (!accept) return "json";
  const wanted = accept.split(",").map((part, index) => {
    const [type, ...parameters] = part.trim().toLowerCase().split(";").map((each) => each.trim());
    const weight = Number(parameters.find((each) => each.startsWith("q="))?.slice(2) ?? 1);
    return { type, weight: Number.isFinite(weight) ? weight : 0, index };
  }).filter((each) => each.weight > 0).sort((a, b) => b.weight - a.weight || a.index - b.index);
  for (const { type } of wanted) if (Object.hasOwn(TYPES, type)) return TYPES[type];
  throw new AppError("not-acceptable", `None of ${accept.slice(0, 100)} is offered; there are application/json, application/x-ndjson, text/csv and application/vnd.apache.arrow.stream.`);
}
