/** The constants set as lists, for completion, corrections and the palette. */
import { ANALYTES as analytes, SOLIDS as solids, SPECIES as species } from "@/lib/chemistry/data";
import type { Analyte, Solid, Species } from "@/lib/chemistry/data/types";

export const ANALYTES: readonly Analyte[] = Object.values(analytes);
export const SOLIDS: readonly Solid[] = Object.values(solids);
export const SPECIES: readonly Species[] = Object.values(species);
