const LETTERS = "ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz0123456789+/";
const INVALID = 255;
const SPACE = 254;
const PAD = 61;

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

/** Base64 in lines of 76 characters. */
export function writeBase64(bytes: Uint8Array): string {
  const lines: string[] = [];
  for (let at = 0; at < bytes.length; at += 57) lines.push(base64Line(bytes.subarray(at, at + 57)));
  return lines.join("\n");
}

function base64Line(bytes: Uint8Array): string {
  let line = "";
  for (let at = 0; at < bytes.length; at += 3) {
    const [a = 0, b, c] = bytes.subarray(at, at + 3);
    const three = (a << 16) | ((b ?? 0) << 8) | (c ?? 0);
    const letter = (shift: number) => LETTERS[(three >> shift) & 63];
    line += `${letter(18)}${letter(12)}${b === undefined ? "=" : letter(6)}${c === undefined ? "=" : letter(0)}`;
  }
  return line;
}
