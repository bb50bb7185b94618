import { passLine } from "@/lib/commands/stream-memory";

/** What the palette may ask of the console, when the console is the page in front. */
export interface ConsoleDoor {
  run(line: string): void;
  fill(text: string): void;
}

let door: ConsoleDoor | null = null;

/** The console opens the door while it is mounted. Returns the closing of it. */
export function openDoor(opened: ConsoleDoor): () => void {
  door = opened;
  return () => { if (door === opened) door = null; };
}

export const consoleDoor = (): ConsoleDoor | null => door;

/** Hands a line to the console: at once where it is in front, else over the way there. `isFinished` false only fills the prompt. */
export function toConsole(line: string, isFinished: boolean, navigate: (path: string) => void): void {
  if (door) return isFinished ? door.run(line) : door.fill(line);
  passLine(sessionStorage, (isFinished ? "run:" : "fill:") + line);
  navigate("/");
}
