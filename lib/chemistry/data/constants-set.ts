/** The constants that a job computes with: the built-in set, or that set with a spec's own species, solids and analytes. */
import { ANALYTES } from "./analytes";
import { SOLIDS } from "./solids";
import { SPECIES } from "./species";
import type { Analyte, Solid, Species } from "./types";

export interface ConstantsSet {
  species: readonly Species[];
  solids: readonly Solid[];
  analytes: readonly Analyte[];
}

export const BUILT_IN: ConstantsSet = { species: SPECIES, solids: SOLIDS, analytes: ANALYTES };
