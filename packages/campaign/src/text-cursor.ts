import { isTime } from "./instants";

/**
 * Reads the plainest forms of JSON out of a text, without a copy of it: strings without escapes, numbers,
 * null. What isn't one of these is left for JSON.parse, which knows all forms and all errors.
 */
const QUOTE = 34;
const MINUS = 45;
const POINT = 46;
const ZERO = 48;
const NINE = 57;
const BACKSLASH = 92;

/** Letters of a pattern's strings, as bits of `letters`. */
export const KEY_LETTER = 1;
export const ID_LETTER = 2;
export const NAME_LETTER = 4;

const letters = new Uint8Array(128);
mark("abcdefghijklmnopqrstuvwxyz0123456789", KEY_LETTER | ID_LETTER | NAME_LETTER);
mark("ABCDEFGHIJKLMNOPQRSTUVWXYZ_", ID_LETTER | NAME_LETTER);
mark("-", KEY_LETTER | ID_LETTER);
mark(".:", ID_LETTER);

function mark(all: string, bits: number): void {
  for (const letter of all) letters[letter.charCodeAt(0)]! |= bits;
}

/** 2031-03-01T00:00:00Z, and with nine digits of a second. */
const SHORTEST_TIME = 20;
const LONGEST_TIME = 30;

/** Numbers of at most this many digits, with a point among them, are one exact division. */
const EXACT_DIGITS = 15;
const powersOfTen = Float64Array.from({ length: EXACT_DIGITS + 1 }, (_, i) => 10 ** i);

/**
 * Nothing is looked at from `limit` on, but for strings that run on: looking behind a text's end
 * makes every look at a letter slower from then on (the engine gives up its fastest form of it).
 */
export class TextCursor {
  at = 0;
  limit: number;
  readonly #strings = new Strings();

  constructor(public text = "") {
    this.limit = text.length;
  }

  turnTo(text: string, at = 0, limit = text.length): void {
    this.text = text;
    this.at = at;
    this.limit = limit;
  }

  isAtEnd(): boolean {
    return this.at >= this.limit;
  }

  /** The sign that stands next; 0 at the end. */
  code(): number {
    return this.at < this.limit ? this.text.charCodeAt(this.at) : 0;
  }

  space(): void {
    const { text, limit } = this;
    let { at } = this;
    while (at < limit && isSpace(text.charCodeAt(at))) at += 1;
    this.at = at;
  }

  /** Passes a sign and the space around it; false where there is another. */
  take(sign: number): boolean {
    this.space();
    if (this.code() !== sign) return false;
    this.at += 1;
    this.space();
    return true;
  }

  /** Passes the word where it stands next. */
  word(word: string): boolean {
    const { text, at } = this;
    if (at + word.length > this.limit) return false;
    for (let i = 0; i < word.length; i++) {
      if (text.charCodeAt(at + i) !== word.charCodeAt(i)) return false;
    }
    this.at = at + word.length;
    return true;
  }

  /** Passes the string where it stands next: that of the one before, most likely. */
  same(string: string | null): boolean {
    if (string === null || string === "" || this.code() !== QUOTE) return false;
    const { text } = this;
    const start = this.at + 1;
    const end = start + string.length;
    if (end >= this.limit || text.charCodeAt(end) !== QUOTE) return false;
    if (!isAt(text, start, string)) return false;
    this.at = end + 1;
    return true;
  }

  /** The time that stands next (RFC 3339, in UTC), or null, with the cursor where it was. */
  time(): string | null {
    if (this.code() !== QUOTE) return null;
    const { text } = this;
    const start = this.at + 1;
    let end = start + SHORTEST_TIME;
    while (end < this.limit && end - start < LONGEST_TIME && text.charCodeAt(end) !== QUOTE) {
      end += 1;
    }
    if (end >= this.limit || text.charCodeAt(end) !== QUOTE || !isTime(text, start, end)) {
      return null;
    }
    this.at = end + 1;
    return copyOf(text, start, end);
  }

  /**
   * The string that stands next, when it is of the pattern's letters and not too long, and not
   * too short: else null, and the cursor is anywhere.
   */
  lettered(bit: number, most: number): string | null {
    const { text } = this;
    if (this.code() !== QUOTE) return null;
    const start = this.at + 1;
    let at = start;
    let hash = 0;
    let code = letterAt(text, at);
    while (code < 128 && (letters[code]! & bit) !== 0) {
      hash = (Math.imul(hash, 31) + code) | 0;
      code = letterAt(text, ++at);
    }
    if (code !== QUOTE || at === start || at - start > most) return null;
    this.at = at + 1;
    return bit === ID_LETTER
      ? copyOf(text, start, at)
      : this.#strings.of(text, { start, end: at, hash });
  }

  /** Any string without an escape; null for one with, and for what is no string. */
  plain(most: number): string | null {
    const { text } = this;
    if (this.code() !== QUOTE) return null;
    const start = this.at + 1;
    let at = start;
    let hash = 0;
    let code = letterAt(text, at);
    while (code >= 32 && code !== QUOTE && code !== BACKSLASH) {
      hash = (Math.imul(hash, 31) + code) | 0;
      code = letterAt(text, ++at);
    }
    if (code !== QUOTE || at === start || at - start > most) return null;
    this.at = at + 1;
    return this.#strings.of(text, { start, end: at, hash });
  }

  /** The number that stands next; NaN where none does, and for one too large for a double. */
  number(): number {
    const { text } = this;
    const start = this.at;
    let at = start;
    const negative = letterAt(text, at) === MINUS;
    if (negative) at += 1;
    const first = at;
    let mantissa = 0;
    let code = letterAt(text, at);
    while (code >= ZERO && code <= NINE) {
      mantissa = mantissa * 10 + (code - ZERO);
      code = letterAt(text, ++at);
    }
    let digits = at - first;
    if (digits === 0 || (digits > 1 && text.charCodeAt(first) === ZERO)) return Number.NaN;
    let decimals = 0;
    if (code === POINT) {
      const point = ++at;
      code = letterAt(text, at);
      while (code >= ZERO && code <= NINE) {
        mantissa = mantissa * 10 + (code - ZERO);
        code = letterAt(text, ++at);
      }
      decimals = at - point;
      if (decimals === 0) return Number.NaN;
      digits += decimals;
    }
    if (code === 101 || code === 69) return this.#power(start, at + 1);
    this.at = at;
    // Both are whole and below 2^53, so the quotient is the nearest double (Clinger 1990).
    if (digits <= EXACT_DIGITS) {
      const value = mantissa / powersOfTen[decimals]!;
      return negative ? -value : value;
    }
    return finite(Number(text.slice(start, at)));
  }

  #power(start: number, from: number): number {
    const { text } = this;
    let at = from;
    const sign = letterAt(text, at);
    if (sign === 43 || sign === MINUS) at += 1;
    const first = at;
    while (letterAt(text, at) >= ZERO && letterAt(text, at) <= NINE) at += 1;
    if (at === first) return Number.NaN;
    this.at = at;
    return finite(Number(text.slice(start, at)));
  }

  /** Passes the value that stands next, whatever it is; false where the text ends before it does. */
  pass(): boolean {
    const { text } = this;
    let depth = 0;
    while (this.at < text.length) {
      const code = text.charCodeAt(this.at);
      if (code === QUOTE) {
        if (!this.#passString()) return false;
      } else if (depth === 0 && (code === 44 || code === 93 || code === 125)) {
        return true;
      } else {
        if (code === 91 || code === 123) depth += 1;
        else if (code === 93 || code === 125) depth -= 1;
        this.at += 1;
      }
      if (depth === 0 && (code === QUOTE || code === 93 || code === 125)) return true;
    }
    return false;
  }

  #passString(): boolean {
    const { text } = this;
    let at = this.at + 1;
    while (at < text.length) {
      const code = text.charCodeAt(at);
      if (code === QUOTE) {
        this.at = at + 1;
        return true;
      }
      at += code === BACKSLASH ? 2 : 1;
    }
    return false;
  }
}

function isSpace(code: number): boolean {
  return code === 32 || code === 10 || code === 13 || code === 9;
}

/** 0, which no string or number has in it, where the text has ended. */
function letterAt(text: string, at: number): number {
  return at < text.length ? text.charCodeAt(at) : 0;
}

function finite(value: number): number {
  return Number.isFinite(value) ? value : Number.NaN;
}

/** From 13 letters on, V8's slices are views that keep the whole text from being freed. */
const LONGEST_COPY = 12;

function copyOf(text: string, start: number, end: number): string {
  const slice = text.slice(start, end);
  // A text put together is made anew when it is looked at.
  return slice.length > LONGEST_COPY ? ` ${slice}`.slice(1) : slice;
}

type Piece = { start: number; end: number; hash: number };

/**
 * One string for all that are alike: a list's measurands, units and batches are few, and a copy
 * for each mention would take more room than the rest of a measurement.
 */
export class Strings {
  readonly #slots: (string | undefined)[] = Array.from({ length: 4096 });

  of(text: string, { start, end, hash }: Piece): string {
    const slot = (hash ^ (hash >>> 12)) & 4095;
    const known = this.#slots[slot];
    if (known?.length === end - start && isAt(text, start, known)) return known;
    const made = copyOf(text, start, end);
    this.#slots[slot] = made;
    return made;
  }
}

function isAt(text: string, start: number, known: string): boolean {
  for (let i = 0; i < known.length; i++) {
    if (text.charCodeAt(start + i) !== known.charCodeAt(i)) return false;
  }
  return true;
}
