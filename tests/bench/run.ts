/** `npm run bench [-- ROWS]`: speed of the kernel. `npm run bench -- --latency`: how long a typed water takes on its way through the product. */
await (process.argv.includes("--latency") ? import("./latency-bench") : import("./kernel-bench"));

export {};
