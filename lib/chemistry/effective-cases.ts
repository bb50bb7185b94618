/** Cases with their `like` chains followed: each key of a case wins over the one of the case it is like. */
import type { JobSpec } from "@/lib/schemas/job-spec";

export type SpecCase = JobSpec["cases"][number];

/** The cases as they run. A `like` that leads nowhere or round in a circle is left alone: the check names it. */
export function effectiveCases(cases: readonly SpecCase[]): SpecCase[] {
  const byName = new Map(cases.map((each) => [each.name, each]));
  return cases.map((each) => {
    let merged: SpecCase = each;
    const seen = new Set([each.name]);
    for (let base = each.like; base !== undefined && byName.has(base) && !seen.has(base); base = byName.get(base)!.like) {
      seen.add(base);
      merged = { ...byName.get(base)!, ...merged };
    }
    return merged;
  });
}

export type Fact = NonNullable<SpecCase["close"]>[number];

export const factName = (fact: Fact): string => (typeof fact === "string" ? fact : "saturated");
