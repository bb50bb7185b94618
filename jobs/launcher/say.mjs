/** What the launcher tells its user. Everything goes through here, so that commands may keep stdout to themselves. */
let target = process.stdout;

/** From now on progress goes to stderr: for commands whose stdout is their answer. */
export function sayOnStderr() { target = process.stderr; }

export function say(text) { target.write(`${text}\n`); }

/** A failure that the user can do something about: shown as its message alone, without a stack. */
export class StartError extends Error {
  name = "StartError";
}

export const pause = (ms) => new Promise((resolve) => { setTimeout(resolve, ms); });
