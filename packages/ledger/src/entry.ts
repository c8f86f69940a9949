import { canonicalBytes, canonicalJson } from "./canonical";
import { hex, utf8 } from "./bytes";
import { hashLeaf } from "./hasher";
import type { Hasher } from "./hasher";
import { LedgerError } from "./ledger-error";

/** Who appended an entry, by opaque ids: names stay outside, so that a person can be forgotten. */
export type EntryAuthor = { member: string; team: string | null } | { system: true };

/** What the tree hashes: the envelope of one payload. */
export type Entry = {
  v: 1;
  campaign: string;
  /** Position in the ledger, from 0 without gaps. */
  seq: number;
  /** RFC 3339 UTC with six decimals; strictly increasing with seq. */
  at: string;
  by: EntryAuthor;
  kind: string;
  /** SHA-256 of the payload's canonical text, lower-case hexadecimal. */
  payloadSha256: string;
};

export const MAX_PAYLOAD_BYTES = 1_048_576;

/** SHA-256(0x00 || canonical bytes of the entry). */
export function leafHash(hasher: Hasher, entry: Entry): Uint8Array {
  return hashLeaf(hasher, canonicalBytes(entry));
}

/**
 * The canonical text of a payload.
 *
 * @throws {LedgerError} `not-json`; `payload-too-large` above MAX_PAYLOAD_BYTES in UTF-8
 */
export function payloadText(payload: unknown): string {
  const text = canonicalJson(payload);
  const size = utf8(text).length;
  if (size > MAX_PAYLOAD_BYTES) {
    throw new LedgerError(
      "payload-too-large",
      `found a payload of ${size} bytes; allowed are ${MAX_PAYLOAD_BYTES}`,
    );
  }
  return text;
}

/** SHA-256 of a payload's text, lower-case hexadecimal. */
export function payloadDigest(hasher: Hasher, text: string): string {
  return hex(hasher(utf8(text)));
}

/**
 * Reads an entry from a JSON value: exactly the properties of `Entry`, nothing else.
 *
 * @throws {LedgerError} `not-an-entry`, naming the property
 */
export function readEntry(value: unknown): Entry {
  const entry = readRecord(value, "the entry", [
    "v",
    "campaign",
    "seq",
    "at",
    "by",
    "kind",
    "payloadSha256",
  ]);
  if (entry["v"] !== 1) throw refusal("v", entry["v"], "1");
  if (!Number.isSafeInteger(entry["seq"]) || (entry["seq"] as number) < 0) {
    throw refusal("seq", entry["seq"], "a whole number from 0");
  }
  return {
    v: 1,
    campaign: readText(entry, "campaign", /^[a-z0-9][a-z0-9-]{0,63}$/, "a campaign's key"),
    seq: entry["seq"] as number,
    at: readTime(entry),
    by: readAuthor(entry["by"]),
    kind: readText(entry, "kind", /^[a-z]+(-[a-z]+)*\.[a-z]+(-[a-z]+)*$/, "an entry kind"),
    payloadSha256: readText(entry, "payloadSha256", /^[0-9a-f]{64}$/, "64 hexadecimal digits"),
  };
}

function readAuthor(value: unknown): EntryAuthor {
  if (typeof value === "object" && value !== null && "system" in value) {
    const author = readRecord(value, "by", ["system"]);
    if (author["system"] !== true) throw refusal("by/system", author["system"], "true");
    return { system: true };
  }
  const author = readRecord(value, "by", ["member", "team"]);
  const member = readText(author, "member", /^[^\s]{1,200}$/u, "a member's id");
  if (author["team"] === null) return { member, team: null };
  return {
    member,
    team: readText(author, "team", /^[a-z0-9][a-z0-9-]{0,63}$/, "a team's key or null"),
  };
}

function readTime(entry: Record<string, unknown>): string {
  const allowed = "a time such as 2031-03-01T00:00:00.000000Z";
  const at = readText(entry, "at", /^\d{4}-\d\d-\d\dT\d\d:\d\d:\d\d\.\d{6}Z$/, allowed);
  const milliseconds = `${at.slice(0, 23)}Z`;
  const time = new Date(milliseconds);
  // Date accepts 30 February as 2 March.
  if (Number.isNaN(time.getTime()) || time.toISOString() !== milliseconds) {
    throw refusal("at", at, allowed);
  }
  return at;
}

function readText(
  record: Record<string, unknown>,
  name: string,
  pattern: RegExp,
  allowed: string,
): string {
  const value = record[name];
  if (typeof value !== "string" || !pattern.test(value)) throw refusal(name, value, allowed);
  return value;
}

function readRecord(value: unknown, what: string, names: string[]): Record<string, unknown> {
  if (typeof value !== "object" || value === null || Array.isArray(value)) {
    throw refusal(what, value, `an object with ${names.join(", ")}`);
  }
  const found = Object.keys(value);
  if (found.length !== names.length || !names.every((name) => Object.hasOwn(value, name))) {
    throw refusal(what, found, `exactly the properties ${names.join(", ")}`);
  }
  return value as Record<string, unknown>;
}

function refusal(where: string, found: unknown, allowed: string): LedgerError {
  const shown = JSON.stringify(found) ?? "nothing";
  return new LedgerError(
    "not-an-entry",
    `${where}: found ${shown.slice(0, 100)}; allowed is ${allowed}`,
  );
}
