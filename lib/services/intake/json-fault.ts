/**
 * Finds where a text stops being JSON: line, column, and the pointer of the value in which it happens. JSON.parse
 * names only a position, and not in every message. Runs after JSON.parse has failed, over text known to be shallow.
 */
export interface JsonFault { message: string; line: number; column: number; pointer: string; near: string }

class Fault extends Error {
  constructor(message: string, readonly at: number) { super(message); }
}

const NUMBER = /-?(?:0|[1-9]\d*)(?:\.\d+)?(?:[eE][+-]?\d+)?/y;
const SPACE = /[ \t\n\r]*/y;

class Scanner {
  private at = 0;
  readonly path: string[] = [];
  constructor(private readonly text: string) {}

  document(): void {
    this.value();
    this.space();
    if (this.at < this.text.length) throw new Fault("text after the end of the document", this.at);
  }

  private space(): void {
    SPACE.lastIndex = this.at;
    SPACE.exec(this.text);
    this.at = SPACE.lastIndex;
  }

  private value(): void {
    this.space();
    const char = this.text[this.at];
    if (char === undefined) throw new Fault("the document ends too early", this.at);
    if (char === "{") return this.members("}", () => this.member());
    if (char === "[") {
      let index = 0;
      return this.members("]", () => { this.inside(String(index++), () => this.value()); });
    }
    if (char === '"') { this.string(); return; }
    for (const word of ["true", "false", "null"]) {
      if (this.text.startsWith(word, this.at)) { this.at += word.length; return; }
    }
    NUMBER.lastIndex = this.at;
    if (!NUMBER.test(this.text)) throw new Fault("a value is expected", this.at);
    this.at = NUMBER.lastIndex;
  }

  private members(close: string, member: () => void): void {
    this.at++;
    this.space();
    if (this.text[this.at] === close) { this.at++; return; }
    for (;;) {
      member();
      this.space();
      const char = this.text[this.at];
      if (char === close) { this.at++; return; }
      if (char !== ",") throw new Fault(char === undefined ? "the document ends too early" : `a comma or ${close} is expected`, this.at);
      this.at++;
      this.space();
      if (this.text[this.at] === close) throw new Fault("a comma with nothing after it", this.at);
    }
  }

  private member(): void {
    this.space();
    if (this.text[this.at] !== '"') throw new Fault("a key in double quotes is expected", this.at);
    const key = this.string();
    this.space();
    if (this.text[this.at] !== ":") throw new Fault("a colon is expected", this.at);
    this.at++;
    this.inside(key, () => this.value());
  }

  private inside(part: string, body: () => void): void {
    this.path.push(part);
    body();
    this.path.pop();
  }

  private string(): string {
    const start = ++this.at;
    for (; this.at < this.text.length; this.at++) {
      const code = this.text.charCodeAt(this.at);
      if (code === 0x22) return this.text.slice(start, this.at++);
      if (code < 0x20) throw new Fault("a line break or control character inside a text", this.at);
      if (code === 0x5c && !/^(?:["\\/bfnrt]|u[\da-fA-F]{4})/.test(this.text.slice(this.at + 1, this.at + 6))) {
        throw new Fault("an escape that JSON does not know", this.at);
      }
      if (code === 0x5c) this.at++;
    }
    throw new Fault("a text without its closing quote", start - 1);
  }
}

/** The first fault of a text that JSON.parse refused. */
export function findJsonFault(text: string): JsonFault {
  const scanner = new Scanner(text);
  let message = "it cannot be read";
  let at = 0;
  try {
    scanner.document();
  } catch (error) {
    if (!(error instanceof Fault)) throw error;
    message = error.message;
    at = error.at;
  }
  const before = text.slice(0, at);
  const line = before.split("\n").length;
  const pointer = scanner.path.map((part) => "/" + part.replaceAll("~", "~0").replaceAll("/", "~1")).join("");
  return {
    message, line, column: at - before.lastIndexOf("\n"), pointer: pointer.slice(0, 300),
    near: text.slice(at, at + 30).split("\n")[0],
  };
}
