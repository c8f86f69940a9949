const LETTERS = "ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz0123456789+/";
const INVALID = 255;
const SPACE = 254;
const PAD = 61;

const CODES = Uint8Array.from([...LETTERS].map((letter) => letter.charCodeAt(0)));
const VALUES = new Uint8Array(128).fill(INVALID);
for (const blank of " \t\r\n") VALUES[blank.charCodeAt(0)] = SPACE;
for (const [value, letter] of [...LETTERS].entries()) VALUES[letter.charCodeAt(0)] = value;

/**
 * The bytes of base64 text (RFC 4648, section 4), line breaks anywhere; text where it isn't that or
 * is cut off, which the browsers' own decoder lets pass.
 */
export function readBase64(text: string): Uint8Array<ArrayBuffer> | string {
  const bytes = new Uint8Array(Math.floor((text.length * 3) / 4));
  let [length, bits, held, pads] = [0, 0, 0, 0];
  for (let at = 0; at < text.length; at += 1) {
    const code = text.charCodeAt(at);
    if (code === PAD) {
      pads += 1;
      continue;
    }
    const value = code < 128 ? (VALUES[code] as number) : INVALID;
    if (value === SPACE) continue;
    if (value === INVALID) return `${JSON.stringify(text[at])} in base64`;
    if (pads > 0) return "base64 that goes on after its end (=)";
    held = ((held << 6) | value) & 0xffff;
    bits += 6;
    if (bits >= 8) {
      bits -= 8;
      bytes[length] = (held >> bits) & 0xff;
      length += 1;
    }
  }
  // 6 bits over: a letter alone; 4 or 2: two or three letters, filled up by == or =.
  const wanted = bits === 4 ? 2 : bits === 2 ? 1 : 0;
  if (bits === 6 || pads !== wanted) return "base64 that is cut off";
  return bytes.subarray(0, length);
}

const LINE_BYTES = 57;
const LINE_FEED = 10;

/** Base64 in lines of 76 characters. */
export function writeBase64(bytes: Uint8Array): string {
  const thirds = Math.ceil(bytes.length / 3);
  const letters = new Uint8Array(4 * thirds + Math.ceil(bytes.length / LINE_BYTES));
  let to = 0;
  for (let at = 0; at < bytes.length; at += 3) {
    if (at > 0 && at % LINE_BYTES === 0) letters[to++] = LINE_FEED;
    const left = bytes.length - at;
    const three = (byteAt(bytes, at) << 16) | (byteAt(bytes, at + 1) << 8) | byteAt(bytes, at + 2);
    letters[to++] = CODES[three >> 18] as number;
    letters[to++] = CODES[(three >> 12) & 63] as number;
    letters[to++] = left > 1 ? (CODES[(three >> 6) & 63] as number) : PAD;
    letters[to++] = left > 2 ? (CODES[three & 63] as number) : PAD;
  }
  return new TextDecoder().decode(letters.subarray(0, to));
}

function byteAt(bytes: Uint8Array, at: number): number {
  return at < bytes.length ? (bytes[at] as number) : 0;
}
