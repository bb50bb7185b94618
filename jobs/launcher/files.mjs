import { closeSync, fsyncSync, mkdirSync, openSync, readFileSync, renameSync, writeSync } from "node:fs";
import path from "node:path";

/** Text of a file, or null where there is none. */
export function readIfThere(file) {
  try {
    return readFileSync(file, "utf8");
  } catch (error) {
    if (error.code === "ENOENT" || error.code === "ENOTDIR") return null;
    throw error;
  }
}

/** JSON of a file, or null where there is none or it is cut off. */
export function readJson(file) {
  const text = readIfThere(file);
  try {
    return text === null ? null : JSON.parse(text);
  } catch {
    return null;
  }
}

/** Writes a file that only its owner reads, whole or not at all. */
export function writePrivate(file, text) {
  mkdirSync(path.dirname(file), { recursive: true, mode: 0o711 });
  const draft = `${file}.${process.pid}.new`;
  const fd = openSync(draft, "w", 0o600);
  try {
    writeSync(fd, text);
    fsyncSync(fd);
  } finally {
    closeSync(fd);
  }
  renameSync(draft, file);
}
