/**
 * Values from outside the project as data: what, where it is published, what it is, how far the product may be off and why that far. Each goes
 * the whole way from a spec document to a column. published-values.test.ts holds the product to them and writes the table with the
 * deviations found (lib/chemistry/data/checks.json), which the docs show.
 */
import { buffers } from "./published-buffers";
import { equilibria } from "./published-equilibria";
import { solubilities } from "./published-solubilities";

export interface PublishedCheck {
  topic: string;
  /** With temperature and activity model, so that no two read alike. */
  what: string;
  unit: string;
  source: string;
  /** Written down from memory of the source. */
  fromMemory: boolean;
  /** The published figure; the middle of a published range. */
  value: number;
  /** Largest deviation, in the unit or as a share of the value. */
  tolerance: { absolute: number } | { share: number };
  /** Why the product may be that far off. */
  because: string;
  find(): number;
}

export const PUBLISHED_CHECKS: readonly PublishedCheck[] = [...equilibria(), ...solubilities(), ...buffers()];

/** In the unit of the check. */
export const allowed = ({ tolerance, value }: PublishedCheck): number => ("absolute" in tolerance ? tolerance.absolute : tolerance.share * Math.abs(value));
