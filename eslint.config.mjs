/** Next's rules, and the arrows of DEVELOPERS.md: who may import whom. Anything else is an error. */
import path from "node:path";
import next from "eslint-config-next";

const ROOT = import.meta.dirname;

/**
 * Folder → what of ours its files may import besides what the folder itself holds. The longest folder that holds a file counts. lib/errors.ts
 * and lib/ids.ts import nothing and are free to all but the kernel and the constants.
 */
const ARROWS = {
  "app": ["components", "lib/http", "lib/services", "lib/schemas", "lib/client"],
  "app/api": ["lib/http", "lib/services", "lib/schemas", "openapi"],
  "components": ["lib/schemas", "lib/commands", "lib/client", "lib/chemistry"],
  "components/ui": [],
  "lib/schemas": ["lib/chemistry/data"],
  "lib/kernel": [],
  "lib/chemistry": ["lib/kernel", "lib/schemas"],
  "lib/chemistry/data": [],
  "lib/results": ["lib/schemas", "lib/chemistry"],
  "lib/services": ["db", "lib/chemistry", "lib/results", "lib/schemas", "lib/env.ts", "jobs/queue.ts", "jobs/definitions"],
  "lib/http": ["lib/services", "lib/schemas", "lib/env.ts"],
  "lib/commands": ["lib/schemas", "lib/client", "lib/chemistry"],
  "lib/client": ["lib/schemas"],
  "db": ["lib/env.ts", "lib/schemas"],
  // The seed puts its data in through the services that people use.
  "db/demo": ["db", "lib/services", "lib/schemas"],
  "jobs": ["lib/services", "lib/chemistry", "lib/kernel", "lib/results", "lib/schemas", "lib/env.ts", "db"],
  "openapi": ["lib/schemas"],
};
const FREE = ["lib/errors.ts", "lib/ids.ts"];
const CLOSED = ["lib/kernel", "lib/chemistry/data"];

/** Packages that a folder may not touch: thin edges hold no database, and what runs in browsers nothing of Node. */
const DATABASE = /^(drizzle-orm|pg|pg-boss|pg-copy-streams)(\/|$)/;
const NODE = /^node:/;
const PACKAGES = {
  "app": [DATABASE], "components": [DATABASE, NODE], "lib/schemas": [DATABASE, NODE], "lib/kernel": [/./], "lib/chemistry": [DATABASE, NODE],
  "lib/client": [DATABASE, NODE], "lib/commands": [DATABASE, NODE], "openapi": [DATABASE],
};

const holds = (folder, file) => file === folder || file.replace(/\.tsx?$/, "") === folder.replace(/\.ts$/, "") || file.startsWith(`${folder}/`);
const longest = (table, file) => Object.keys(table).filter((folder) => holds(folder, file)).sort((a, b) => b.length - a.length)[0];

const arrows = {
  meta: { type: "problem", schema: [], messages: { layer: "{{folder}} may not import {{target}}; DEVELOPERS.md lists what it may.", package: "{{folder}} may not import {{target}}." } },
  create(context) {
    const file = path.relative(ROOT, context.filename).replaceAll(path.sep, "/");
    const folder = longest(ARROWS, file);
    if (!folder) return {};
    const check = (node) => {
      const name = node.source?.value;
      if (typeof name !== "string") return;
      if (!name.startsWith("@/") && !name.startsWith(".")) {
        const banned = PACKAGES[longest(PACKAGES, file)] ?? [];
        if (banned.some((pattern) => pattern.test(name))) context.report({ node, messageId: "package", data: { folder, target: name } });
        return;
      }
      const target = name.startsWith("@/") ? name.slice(2) : path.posix.join(path.posix.dirname(file), name);
      if (holds(folder, target)) return;
      const allowed = [...ARROWS[folder], ...(CLOSED.includes(folder) ? [] : FREE)];
      if (!allowed.some((each) => holds(each, target))) context.report({ node, messageId: "layer", data: { folder, target } });
    };
    return { ImportDeclaration: check, ExportNamedDeclaration: check, ExportAllDeclaration: check, ImportExpression: check };
  },
};

const config = [
  { ignores: [".next*/**", ".build*/**", ".data*/**", "next-env.d.ts"] },
  ...next,
  {
    rules: {
      // These two come from React's compiler, which is not used here: what only a browser knows (storage, media queries) is read in an
      // effect on purpose, so that the first paint equals the server's.
      "react-hooks/set-state-in-effect": "off",
      "react-hooks/refs": "off",
      // Signing in and out load the page anew on purpose: nothing of one person may stay in memory for the next.
      "@next/next/no-location-assign-relative-destination": "off",
    },
  },
  { plugins: { tufa: { rules: { arrows } } }, rules: { "tufa/arrows": "error" } },
  {
    files: ["**/*.{ts,tsx,mjs}"],
    ignores: ["lib/env.ts", "next.config.mjs", "jobs/launcher/**", "jobs/start.mjs", "jobs/command.mjs", "tests/**"],
    rules: {
      "no-restricted-syntax": ["error", { selector: "MemberExpression[object.name='process'][property.name='env']", message: "Only lib/env.ts reads the environment." }],
    },
  },
];

export default config;
