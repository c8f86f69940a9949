import type { EntryKind } from "@weighhouse/campaign/entries";
import { problemLine } from "@weighhouse/campaign/problem";
import { readPayload } from "@weighhouse/campaign/payloads";
import { payloadDigest, payloadText } from "@weighhouse/ledger/entry";
import { LedgerError } from "@weighhouse/ledger/ledger-error";
import { nodeHasher } from "@weighhouse/ledger/node-hasher";
import { StoreError } from "./store-error";

/** A payload with its defaults written out, its canonical text and that text's SHA-256. */
export type PreparedPayload = { kind: EntryKind; value: unknown; text: string; sha256: string };

/** Reads and digests a payload, before any lock is held. */
export function preparePayload(entry: { kind: EntryKind; payload: unknown }): PreparedPayload {
  const { kind, payload } = entry;
  const read = readPayload(kind, payload);
  if (!read.ok) {
    throw new StoreError(
      "invalid-payload",
      `${kind}: ${read.problems.map(problemLine).join("; ")}`,
      { problems: read.problems },
    );
  }
  try {
    const text = payloadText(read.value);
    return { kind, value: read.value, text, sha256: payloadDigest(nodeHasher, text) };
  } catch (cause) {
    if (!(cause instanceof LedgerError)) throw cause;
    const code = cause.code === "payload-too-large" ? "payload-too-large" : "invalid-payload";
    throw new StoreError(code, `${kind}: ${cause.message}`, { cause });
  }
}
