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

/** Numbers of at most this many digits, with a point among them, are one exact division. */
const EXACT_DIGITS = 15;
const powersOfTen = Float64Array.from({ length: EXACT_DIGITS + 1 }, (_, i) => 10 ** i);

export class TextCursor {
  at = 0;

  constructor(
    readonly text: string,
    readonly strings = new Strings(),
  ) {}

  code(): number {
    return this.text.charCodeAt(this.at);
  }

  space(): void {
    const { text } = this;
    let { at } = this;
    let code = text.charCodeAt(at);
    while (code === 32 || code === 10 || code === 13 || code === 9) code = text.charCodeAt(++at);
    this.at = at;
  }

  /** Passes a sign and the space around it; false where there is another. */
  take(sign: number): boolean {
    this.space();
    if (this.text.charCodeAt(this.at) !== sign) return false;
    this.at += 1;
    this.space();
    return true;
  }

  /** Passes the word where it stands next. */
  word(word: string): boolean {
    const { text, at } = this;
    for (let i = 0; i < word.length; i++) {
      if (text.charCodeAt(at + i) !== word.charCodeAt(i)) return false;
    }
    this.at = at + word.length;
    return true;
  }

  /**
   * The string that stands next, when it is of the pattern's letters and not too long, and not
   * too short: else null, and the cursor is anywhere.
   */
  lettered(bit: number, most: number): string | null {
    const { text } = this;
    if (text.charCodeAt(this.at) !== QUOTE) return null;
    const start = this.at + 1;
    let at = start;
    let hash = 0;
    let code = text.charCodeAt(at);
    while (code < 128 && (letters[code]! & bit) !== 0) {
      hash = (Math.imul(hash, 31) + code) | 0;
      code = text.charCodeAt(++at);
    }
    if (code !== QUOTE || at === start || at - start > most) return null;
    this.at = at + 1;
    return bit === ID_LETTER
      ? text.slice(start, at)
      : this.strings.of(text, { start, end: at, hash });
  }

  /** Any string without an escape; null for one with, and for what is no string. */
  plain(most: number): string | null {
    const { text } = this;
    if (text.charCodeAt(this.at) !== QUOTE) return null;
    const start = this.at + 1;
    let at = start;
    let hash = 0;
    let code = text.charCodeAt(at);
    while (code >= 32 && code !== QUOTE && code !== BACKSLASH) {
      hash = (Math.imul(hash, 31) + code) | 0;
      code = text.charCodeAt(++at);
    }
    if (code !== QUOTE || at === start || at - start > most) return null;
    this.at = at + 1;
    return this.strings.of(text, { start, end: at, hash });
  }

  /** The number that stands next; NaN where none does, and for one too large for a double. */
  number(): number {
    const { text } = this;
    const start = this.at;
    let at = start;
    const negative = text.charCodeAt(at) === MINUS;
    if (negative) at += 1;
    const first = at;
    let mantissa = 0;
    let code = text.charCodeAt(at);
    while (code >= ZERO && code <= NINE) {
      mantissa = mantissa * 10 + (code - ZERO);
      code = text.charCodeAt(++at);
    }
    let digits = at - first;
    if (digits === 0 || (digits > 1 && text.charCodeAt(first) === ZERO)) return Number.NaN;
    let decimals = 0;
    if (code === POINT) {
      const point = ++at;
      code = text.charCodeAt(at);
      while (code >= ZERO && code <= NINE) {
        mantissa = mantissa * 10 + (code - ZERO);
        code = text.charCodeAt(++at);
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
    const sign = text.charCodeAt(at);
    if (sign === 43 || sign === MINUS) at += 1;
    const first = at;
    while (text.charCodeAt(at) >= ZERO && text.charCodeAt(at) <= NINE) at += 1;
    if (at === first) return Number.NaN;
    this.at = at;
    return finite(Number(text.slice(start, at)));
  }

  /** Passes the value that stands next, whatever it is; false where the text ends before it does. */
  pass(): boolean {
    const { text } = this;
    let depth = 0;
    for (;;) {
      const code = text.charCodeAt(this.at);
      if (Number.isNaN(code)) return false;
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
  }

  #passString(): boolean {
    const { text } = this;
    let at = this.at + 1;
    for (;;) {
      const code = text.charCodeAt(at);
      if (Number.isNaN(code)) return false;
      if (code === QUOTE) break;
      at += code === BACKSLASH ? 2 : 1;
    }
    this.at = at + 1;
    return true;
  }
}

function finite(value: number): number {
  return Number.isFinite(value) ? value : Number.NaN;
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
    if (known !== undefined && isAt(text, start, end, known)) return known;
    const made = text.slice(start, end);
    this.#slots[slot] = made;
    return made;
  }
}

function isAt(text: string, start: number, end: number, known: string): boolean {
  const { length } = known;
  if (length !== end - start) return false;
  for (let i = 0; i < length; i++) {
    if (text.charCodeAt(start + i) !== known.charCodeAt(i)) return false;
  }
  return true;
}
