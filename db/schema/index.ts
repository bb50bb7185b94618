export * from "./accounts";
export * from "./samples";
export * from "./jobs";
export * from "./operations";
