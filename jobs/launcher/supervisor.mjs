/** Keeps the product's processes alive while it runs and ends them in order when it stops. */
import { spawn } from "node:child_process";
import { once } from "node:events";
import { signal } from "./processes.mjs";
import { pause, say } from "./say.mjs";
import { ROOT } from "./settings.mjs";

const RESTART_MS = 300;
/** A process that lived at least this long was up; deaths before are counted, and too many in a row are a fault that no restart mends. */
const STEADY_MS = 10_000;
const MOST_QUICK_DEATHS = 5;

/**
 * One process with a name. Not detached: with automatic grouping the kernel weighs nice levels within a session only, so that a batch
 * worker in a session of its own would hold up the web server in spite of its nice level.
 */
export class Service {
  #child = null;
  #isStopping = false;
  #quickDeaths = 0;

  /** @param {{ name: string, args: string[], env: Record<string, string | undefined>, nice?: number, isQuiet?: boolean, stopMs: number, onGiveUp: (message: string) => void, onChange?: () => void }} options */
  constructor(options) { this.options = options; }

  get pid() { return this.#child?.pid ?? null; }

  start() {
    const { name, args, env, nice, isQuiet, onChange } = this.options;
    const command = nice ? ["nice", "-n", String(nice), process.execPath] : [process.execPath];
    const child = spawn(command[0], [...command.slice(1), ...args], { cwd: ROOT, env: { ...process.env, ...env }, stdio: ["ignore", isQuiet ? "ignore" : "inherit", "inherit"] });
    const started = Date.now();
    this.#child = child;
    let isOver = false;
    const over = (how) => {
      if (isOver) return;
      isOver = true;
      this.#child = null;
      if (this.#isStopping) return;
      void this.#comeBack(name, how, Date.now() - started);
    };
    child.once("error", (error) => over(error.message));
    child.once("exit", (code, by) => over(by ? `by ${by}` : `with code ${code}`));
    onChange?.();
  }

  async #comeBack(name, how, livedMs) {
    this.#quickDeaths = livedMs < STEADY_MS ? this.#quickDeaths + 1 : 0;
    if (this.#quickDeaths >= MOST_QUICK_DEATHS) {
      this.options.onGiveUp(`${name} ended ${how}, ${MOST_QUICK_DEATHS} times within seconds of its start; what it wrote stands above.`);
      return;
    }
    say(`${name} ended ${how}; starting it again`);
    await pause(RESTART_MS);
    if (!this.#isStopping) this.start();
  }

  /** Ends the process and starts it anew, for code that has changed. */
  restart() { if (this.#child) { this.#quickDeaths = 0; signal(this.#child.pid, "SIGTERM"); } }

  /** From now on a death is no reason to start again: a terminal's Ctrl-C reaches the processes before their turn to be stopped. */
  letGo() { this.#isStopping = true; }

  /** SIGTERM, and SIGKILL where it is still there after its time. */
  async stop() {
    this.#isStopping = true;
    const child = this.#child;
    if (!child) return;
    const ended = once(child, "exit");
    signal(child.pid, "SIGTERM");
    if (await Promise.race([ended.then(() => true), pause(this.options.stopMs)])) return;
    signal(child.pid, "SIGKILL");
    await ended;
  }

  kill() {
    this.#isStopping = true;
    if (this.#child) signal(this.#child.pid, "SIGKILL");
  }
}
