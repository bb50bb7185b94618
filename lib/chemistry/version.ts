/** Version of the solver, recorded with every result; raise it whenever any digit of any answer may change. */
export const ENGINE_VERSION = "0.1.0";
