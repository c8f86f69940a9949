import { createHash, randomBytes } from "node:crypto";

/** Begins every key, so that one that was published by mistake is found by searching for it. */
export const API_KEY_PREFIX = "weighhouse_";

const RANDOM_BYTES = 20;
const CHECK_BYTES = 5;
// RFC 4648, 6, in small letters; 25 bytes are 40 of them without padding.
const LETTERS = "abcdefghijklmnopqrstuvwxyz234567";
const FORM = new RegExp(`^${API_KEY_PREFIX}[a-z2-7]{40}$`);
const SHOWN = 4;

/** A new key: the prefix, 160 random bits, and 40 bits by which a slip of the pen is seen. */
export function makeApiKeyText(): string {
  const random = randomBytes(RANDOM_BYTES);
  return API_KEY_PREFIX + base32(Buffer.concat([random, checkOf(random)]));
}

/** Whether a text can be a key at all; told without asking the database. */
export function isApiKeyText(text: string): boolean {
  if (!FORM.test(text)) return false;
  const bytes = fromBase32(text.slice(API_KEY_PREFIX.length));
  return checkOf(bytes.subarray(0, RANDOM_BYTES)).equals(bytes.subarray(RANDOM_BYTES));
}

/**
 * What is stored of a key. Without salt and slow hashing, which guard what people choose: nobody
 * guesses 160 random bits. It is looked up by this, so no comparison's time tells anything of it.
 */
export function apiKeyHash(text: string): Uint8Array {
  return createHash("sha256").update(text).digest();
}

/** What is shown of a key later on. */
export function apiKeyBegins(text: string): string {
  return text.slice(0, API_KEY_PREFIX.length + SHOWN);
}

function checkOf(random: Buffer): Buffer {
  return createHash("sha256")
    .update(API_KEY_PREFIX)
    .update(random)
    .digest()
    .subarray(0, CHECK_BYTES);
}

function base32(bytes: Buffer): string {
  const bits = [...bytes].map((byte) => byte.toString(2).padStart(8, "0")).join("");
  return (bits.match(/.{5}/g) ?? []).map((five) => LETTERS[parseInt(five, 2)]).join("");
}

function fromBase32(text: string): Buffer {
  const bits = [...text].map((letter) => LETTERS.indexOf(letter).toString(2).padStart(5, "0"));
  return Buffer.from((bits.join("").match(/.{8}/g) ?? []).map((byte) => parseInt(byte, 2)));
}
