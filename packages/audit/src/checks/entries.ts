import type { LedgerRecord } from "@weighhouse/campaign/changes";
import { entryKinds } from "@weighhouse/campaign/entries";
import type { EntryKind } from "@weighhouse/campaign/entries";
import { readPayload } from "@weighhouse/campaign/payloads";
import { problemLine } from "@weighhouse/campaign/problem";
import { utf8 } from "@weighhouse/ledger/bytes";
import { parseCanonical } from "@weighhouse/ledger/canonical";
import { MAX_PAYLOAD_BYTES, payloadDigest, readEntry } from "@weighhouse/ledger/entry";
import type { Entry } from "@weighhouse/ledger/entry";
import { hashLeaf } from "@weighhouse/ledger/hasher";
import type { Hasher } from "@weighhouse/ledger/hasher";
import { LedgerError } from "@weighhouse/ledger/ledger-error";
import { readLines } from "./archive-text";
import type { Files } from "./container";
import { counted, failed, judged } from "./line";
import type { Checked } from "./line";
import { LEDGER, PAYLOADS } from "../layout";

/** The ledger's lines: the leaf of each, and its entry, or null where the line holds none. */
export type ReadEntries = { leaves: Uint8Array[]; entries: (Entry | null)[] };

/** Each line is the canonical text of an entry; seq without gaps, one campaign, times increasing. */
export function checkEntries(files: Files, hasher: Hasher): Checked<ReadEntries> {
  const check = "entries: hash and order";
  const read = readLines(files, LEDGER);
  if (!read.ok) return { line: failed(check, read.fault), value: null };
  const faults: string[] = [];
  let previous: Entry | null = null;
  const entries = read.lines.map((line, index) => {
    const place = `${LEDGER}, line ${index + 1}`;
    const entry =
      line.length > MOST_ENTRY_CHARACTERS
        ? `found ${line.length} characters; allowed are ${MOST_ENTRY_CHARACTERS}`
        : attempt(() => readEntry(parseCanonical(line)));
    if (typeof entry === "string") {
      faults.push(`${place}: ${entry}`);
      return null;
    }
    faults.push(...orderFaults(entry, { index, previous }).map((fault) => `${place}: ${fault}`));
    previous = entry;
    return entry;
  });
  const leaves = read.lines.map((line) => hashLeaf(hasher, new TextEncoder().encode(line)));
  const span = spanOf(entries);
  const detail = `${counted(entries.length, "entry", "entries")}, seq 0 to ${entries.length - 1}, ${span}`;
  return { line: judged(check, faults, detail), value: { leaves, entries } };
}

/** An entry's fields are short; what is long is its payload. */
const MOST_ENTRY_CHARACTERS = 4096;

function orderFaults(
  entry: Entry,
  { index, previous }: { index: number; previous: Entry | null },
): string[] {
  const faults: string[] = [];
  if (entry.seq !== index) faults.push(`found seq ${entry.seq}; allowed is ${index}`);
  if ((entry.kind === "campaign.opened") !== (index === 0)) {
    faults.push(`found kind ${entry.kind}; allowed is campaign.opened first and there only`);
  }
  if (previous === null) return faults;
  if (entry.campaign !== previous.campaign) {
    faults.push(`found campaign ${entry.campaign}; allowed is ${previous.campaign}`);
  }
  if (entry.at <= previous.at) {
    faults.push(`found at ${entry.at}; allowed is a time after ${previous.at} of the entry before`);
  }
  return faults;
}

function spanOf(entries: (Entry | null)[]): string {
  return `${entries[0]?.at ?? "?"} to ${entries.at(-1)?.at ?? "?"}`;
}

/** Each payload is the one whose digest its entry names, and is of its entry's kind. */
export function checkPayloads(
  files: Files,
  entries: readonly (Entry | null)[],
  hasher: Hasher,
): Checked<LedgerRecord[]> {
  const check = "payloads";
  const read = readLines(files, PAYLOADS);
  if (!read.ok) return { line: failed(check, read.fault), value: null };
  const faults: string[] = [];
  if (read.lines.length !== entries.length) {
    faults.push(`${PAYLOADS}: found ${read.lines.length} lines for ${entries.length} entries`);
  }
  const records: LedgerRecord[] = [];
  for (const [index, text] of read.lines.slice(0, entries.length).entries()) {
    const entry = entries[index] ?? null;
    // Said already by the check of the entries.
    if (entry === null) continue;
    const place = `${PAYLOADS}, line ${index + 1} (entry ${entry.seq}, ${entry.kind})`;
    const record = readRecord(entry, text, hasher);
    if (typeof record === "string") faults.push(`${place}: ${record}`);
    else records.push(record);
  }
  const whole = faults.length === 0 && records.length === entries.length;
  const detail = `${counted(records.length, "payload")}, each with the SHA-256 that its entry names`;
  const line =
    faults.length === 0 && !whole
      ? failed(check, `not checked where ${LEDGER} holds no entry`)
      : judged(check, faults, detail);
  return { line, value: whole ? records : null };
}

/** The record of an entry and its payload, or what is wrong with the payload. */
function readRecord(entry: Entry, text: string, hasher: Hasher): LedgerRecord | string {
  const digest = attempt(() => payloadDigest(hasher, text));
  if (digest !== entry.payloadSha256) {
    return `found SHA-256 ${digest}, the entry names ${entry.payloadSha256}`;
  }
  if (utf8(text).length > MAX_PAYLOAD_BYTES) return `found more than ${MAX_PAYLOAD_BYTES} bytes`;
  if (!isKind(entry.kind)) return "a kind that this version doesn't know";
  let payload: unknown;
  try {
    payload = parseCanonical(text);
  } catch (error) {
    return reason(error);
  }
  const read = readPayload(entry.kind, payload);
  if (!read.ok) return problemLine(read.problems[0] as (typeof read.problems)[number]);
  return { seq: entry.seq, at: entry.at, by: entry.by, kind: entry.kind, payload: read.value };
}

function isKind(kind: string): kind is EntryKind {
  return (entryKinds as readonly string[]).includes(kind);
}

/** What the ledger's readers give, or the words in which they refuse. */
function attempt<T>(read: () => T): T | string {
  try {
    return read();
  } catch (error) {
    return reason(error);
  }
}

function reason(error: unknown): string {
  if (error instanceof LedgerError) return error.message;
  throw error;
}
