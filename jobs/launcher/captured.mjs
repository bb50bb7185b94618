import { spawn } from "node:child_process";
import { StartError } from "./say.mjs";
import { ROOT } from "./settings.mjs";

const running = new Set();

/** Runs a program to its end in the root; its output is kept, not shown. */
export function captured(program, args, env = {}) {
  return new Promise((resolve, reject) => {
    const child = spawn(program, args, { cwd: ROOT, env: { ...process.env, ...env }, stdio: ["ignore", "pipe", "pipe"] });
    running.add(child);
    let output = "";
    child.stdout.on("data", (data) => { output += data; });
    child.stderr.on("data", (data) => { output += data; });
    child.once("error", (error) => reject(error.code === "ENOENT" ? new StartError(`${program} is not installed.`) : error));
    child.once("close", (code) => { running.delete(child); resolve({ code, output }); });
  });
}

/** Ends whatever is under way: a start that is given up must leave no npm or build behind. */
export function endCaptured() {
  for (const child of running) child.kill("SIGTERM");
}
