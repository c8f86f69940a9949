import canonicalize from "canonicalize";
import { hasLoneSurrogate, utf8 } from "./bytes";
import { LedgerError } from "./ledger-error";

/** Deeper values are refused: reading and writing them is recursive. */
const MAX_DEPTH = 100;

/**
 * The one text of a JSON value: RFC 8785 (sorted by UTF-16 code units, shortest numbers, no space).
 *
 * The value is checked first, since a serialiser drops or alters what JSON can't hold: undefined,
 * functions, NaN and infinities, lone surrogates, objects of a class. U+0000 is refused because
 * PostgreSQL's text can't store it.
 *
 * @throws {LedgerError} `not-json`, with the JSON Pointer of what was found
 */
export function canonicalJson(value: unknown): string {
  refuseWhatJsonCannotHold(value, "", 0);
  return canonicalize(value) as string;
}

/** UTF-8 bytes of `canonicalJson(value)`. */
export function canonicalBytes(value: unknown): Uint8Array {
  return utf8(canonicalJson(value));
}

/**
 * Reads a JSON text and insists that it is the canonical one.
 *
 * Another spelling of the same value has another digest, and a doubled key hides one of its values.
 *
 * @throws {LedgerError} `not-json` or `not-canonical`
 */
export function parseCanonical(text: string): unknown {
  let value: unknown;
  try {
    value = JSON.parse(text);
  } catch (cause) {
    throw new LedgerError("not-json", "found text that is not JSON; allowed is canonical JSON", {
      cause,
    });
  }
  if (canonicalJson(value) !== text) {
    throw new LedgerError(
      "not-canonical",
      "found JSON in another form than RFC 8785; allowed is the canonical form",
    );
  }
  return value;
}

function refuseWhatJsonCannotHold(value: unknown, pointer: string, depth: number): void {
  if (depth > MAX_DEPTH) throw refusal(pointer, `more than ${MAX_DEPTH} levels`, "fewer levels");
  switch (typeof value) {
    case "boolean":
      return;
    case "string":
      return refuseText(value, pointer);
    case "number":
      if (!Number.isFinite(value)) throw refusal(pointer, String(value), "a finite number");
      return;
    case "object":
      break;
    default:
      throw refusal(pointer, typeof value, "a JSON value");
  }
  if (value === null) return;
  if (Array.isArray(value)) {
    // A plain loop: forEach would step over holes, which are undefined.
    for (let index = 0; index < value.length; index += 1) {
      refuseWhatJsonCannotHold(value[index], `${pointer}/${index}`, depth + 1);
    }
    return;
  }
  const prototype: unknown = Object.getPrototypeOf(value);
  if (prototype !== Object.prototype && prototype !== null) {
    throw refusal(pointer, "an object of a class", "a plain object");
  }
  for (const [name, child] of Object.entries(value)) {
    const at = `${pointer}/${name.replaceAll("~", "~0").replaceAll("/", "~1")}`;
    refuseText(name, at);
    refuseWhatJsonCannotHold(child, at, depth + 1);
  }
}

function refuseText(text: string, pointer: string): void {
  if (text.includes("\u0000")) throw refusal(pointer, "U+0000", "text without U+0000");
  if (hasLoneSurrogate(text)) {
    throw refusal(pointer, "half a surrogate pair", "well-formed Unicode");
  }
}

function refusal(pointer: string, found: string, allowed: string): LedgerError {
  return new LedgerError("not-json", `${pointer || "/"}: found ${found}; allowed is ${allowed}`);
}
