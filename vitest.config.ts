import path from "node:path";
import { defineConfig } from "vitest/config";

/** Groups run one after the other: what measures time or shares a database must not run beside something else. */
const group = (name: string, groupOrder: number, options: Record<string, unknown>) => ({
  extends: true as const,
  test: { name, include: [`tests/${name}/**/*.test.ts`], sequence: { groupOrder }, ...options },
});
/** Files of tests/api that speak to a running product; the others call the route handlers in their own process. */
const OVER_HTTP = ["http", "readme", "rhone"].map((name) => `tests/api/${name}.test.ts`);
const ALONE = { fileParallelism: false, maxWorkers: 1 };
const PRODUCT = { globalSetup: ["tests/helpers/throw-away-product.mjs"], setupFiles: ["tests/helpers/use-product-database.ts"] };

export default defineConfig({
  resolve: { alias: { "@": path.resolve(import.meta.dirname) } },
  test: {
    pool: "forks",
    projects: [
      group("unit", 1, {}),
      group("screen", 1, { include: ["tests/unit/**/*.test.tsx"], environment: "jsdom" }),
      group("property", 1, { testTimeout: 60_000 }),
      group("outside", 1, { testTimeout: 120_000 }),
      group("integration", 2, { ...ALONE, testTimeout: 30_000, hookTimeout: 60_000, globalSetup: ["tests/helpers/throw-away-server.mjs"] }),
      group("api", 3, { ...ALONE, exclude: OVER_HTTP, testTimeout: 30_000, hookTimeout: 60_000, globalSetup: ["tests/helpers/throw-away-api-database.mjs"], setupFiles: ["tests/helpers/use-api-database.ts"] }),
      group("product", 4, { ...ALONE, include: OVER_HTTP, testTimeout: 30_000, hookTimeout: 60_000, ...PRODUCT }),
      group("e2e", 5, { ...ALONE, testTimeout: 60_000, hookTimeout: 90_000, ...PRODUCT }),
    ],
  },
});
