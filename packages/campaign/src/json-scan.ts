import { below } from "./pointer";

/** What a scan of a text finds: the first fault of its syntax, or members that stand twice. */
export type JsonScan = {
  fault: { offset: number; expected: string } | null;
  duplicates: { pointer: string; name: string }[];
};

type Level = {
  pointer: string;
  /** Names so far, of an object; null in a list. */
  names: Set<string> | null;
  index: number;
};

const LITERAL = /true|false|null|-?(?:0|[1-9]\d*)(?:\.\d+)?(?:[eE][+-]?\d+)?/y;
// oxlint-disable-next-line no-control-regex -- JSON refuses control characters inside strings.
const STRING = /"(?:[^"\\\u0000-\u001f]|\\(?:["\\/bfnrt]|u[0-9a-fA-F]{4}))*"/y;
const SPACE = /[ \t\r\n]*/y;

/**
 * Goes through a JSON text (RFC 8259) without building its value, keeping only where it is. Used
 * where JSON.parse has no answer: for the place of an error, and for members named twice. A loop,
 * not a recursion: a text may be nested as deep as it is long.
 */
export function scanJson(text: string): JsonScan {
  return new Scanner(text).scan();
}

class Fault extends Error {
  constructor(
    readonly offset: number,
    readonly expected: string,
  ) {
    super(expected);
  }
}

class Scanner {
  #at = 0;
  #levels: Level[] = [];
  #duplicates: { pointer: string; name: string }[] = [];

  constructor(readonly text: string) {}

  scan(): JsonScan {
    try {
      this.#document();
    } catch (error) {
      if (!(error instanceof Fault)) throw error;
      const { offset, expected } = error;
      return { fault: { offset, expected }, duplicates: this.#duplicates };
    }
    return { fault: null, duplicates: this.#duplicates };
  }

  #document(): void {
    this.#space();
    this.#value("");
    while (this.#levels.length > 0) this.#step(this.#levels.at(-1)!);
    if (this.#at < this.text.length) throw new Fault(this.#at, "nothing after the value");
  }

  /** One member or item, or the end of an object or a list. */
  #step(level: Level): void {
    const { names } = level;
    const [end, things] = names === null ? ["]", "list"] : ["}", "object"];
    if (this.#take(end)) {
      this.#levels.pop();
      return;
    }
    if (level.index > 0 && !this.#take(",")) {
      throw new Fault(this.#at, `, or ${end} in the ${things}`);
    }
    const step = names === null ? level.index : this.#name(names, level.pointer);
    level.index += 1;
    this.#value(below(level.pointer, step));
  }

  #name(names: Set<string>, pointer: string): string {
    const start = this.#at;
    const written = this.#match(STRING);
    if (written === null) throw new Fault(start, "a member's name in double quotes");
    const name = JSON.parse(written) as string;
    if (names.has(name)) this.#duplicates.push({ pointer, name });
    names.add(name);
    if (!this.#take(":")) throw new Fault(this.#at, ": after the member's name");
    return name;
  }

  #value(pointer: string): void {
    if (this.#take("{")) this.#levels.push({ pointer, names: new Set(), index: 0 });
    else if (this.#take("[")) this.#levels.push({ pointer, names: null, index: 0 });
    else if (this.#match(STRING) === null && this.#match(LITERAL) === null) {
      throw new Fault(this.#at, "a JSON value");
    }
  }

  #take(sign: string): boolean {
    if (this.text[this.#at] !== sign) return false;
    this.#at += 1;
    this.#space();
    return true;
  }

  #match(pattern: RegExp): string | null {
    pattern.lastIndex = this.#at;
    const match = pattern.exec(this.text);
    if (match === null) return null;
    this.#at = pattern.lastIndex;
    this.#space();
    return match[0];
  }

  #space(): void {
    SPACE.lastIndex = this.#at;
    SPACE.exec(this.text);
    this.#at = SPACE.lastIndex;
  }
}
