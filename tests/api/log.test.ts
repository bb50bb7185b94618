import { spawnSync } from "node:child_process";
import path from "node:path";
import { build } from "esbuild";
import { expect, test } from "vitest";
import { newToken } from "@/lib/services/tokens/token-format";

test("a token never reaches the log, wherever in a message, an error or its stack it stands", async () => {
  const root = path.resolve(import.meta.dirname, "../..");
  const source = `
    import { log } from "./lib/http/log.ts";
    const token = process.argv[2];
    log().error({ headers: { authorization: "Bearer " + token }, err: new Error("refused " + token) }, "request with " + token + " failed");
  `;
  const { outputFiles } = await build({
    stdin: { contents: source, resolveDir: root, loader: "ts" }, write: false, bundle: true, platform: "node", format: "esm", packages: "external", tsconfig: path.join(root, "tsconfig.json"),
  });
  const token = newToken();
  const { stderr } = spawnSync(process.execPath, ["--input-type=module", "-", token], {
    cwd: root, input: outputFiles[0].text, encoding: "utf8", env: { PATH: process.env.PATH, DATABASE_URL: "postgres://nowhere", TUFA_LOG: "error", NODE_ENV: "test" },
  });
  expect(stderr).toContain("tufa_[removed]");
  expect(stderr.match(/tufa_\[removed\]/g)?.length).toBeGreaterThanOrEqual(4);
  expect(stderr).not.toContain(token.slice(5));
});
