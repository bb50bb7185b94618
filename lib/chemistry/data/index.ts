/** The constants set. A change of any figure gives it a new version; every result names the version it was computed with. */
export const CONSTANTS_VERSION = "2026.1";
export { ANALYTES } from "./analytes";
export { ATOMIC_MASSES } from "./atomic-masses";
export { METHODS } from "./methods";
export { SOLIDS } from "./solids";
export { SOURCES } from "./sources";
export { SPECIES } from "./species";
