import type { LedgerRecord } from "@weighhouse/campaign/changes";
import type { Payload } from "@weighhouse/campaign/entries";
import type { Hasher } from "@weighhouse/ledger/hasher";
import { LedgerError } from "@weighhouse/ledger/ledger-error";
import { sealDigest } from "@weighhouse/ledger/seal";
import { counted, judged, notPresent } from "./line";
import type { CheckLine } from "./line";
import { PAYLOADS } from "../layout";

type SealKind = "prediction.sealed" | "measurement.sealed";

/**
 * Each seal that was opened opens to what was revealed: the digest on record is that of what its
 * entry binds (ledger, team, hypothesis, measurand) with the nonce and content of the opening.
 */
export function checkSeals(
  records: readonly LedgerRecord[],
  { ledger, hasher }: { ledger: string; hasher: Hasher },
): CheckLine {
  const check = "seals";
  const seals = new Map(records.filter(isSeal).map((record) => [digestOf(record), record]));
  if (seals.size === 0) {
    return notPresent(check, `none among ${counted(records.length, "entry", "entries")}`);
  }
  const faults: string[] = [];
  let opened = 0;
  for (const record of records) {
    if (record.kind !== "prediction.revealed" && record.kind !== "measurement.revealed") continue;
    const place = `${PAYLOADS}, line ${record.seq + 1} (entry ${record.seq}, ${record.kind})`;
    const seal = seals.get(digestOf(record));
    if (seal === undefined) {
      faults.push(`${place}: opens a seal that no entry made`);
      continue;
    }
    const digest = openedDigest(record, seal, { ledger, hasher });
    if (digest === digestOf(seal)) opened += 1;
    else
      faults.push(
        `${place}: opens to digest ${digest}, entry ${seal.seq} sealed ${digestOf(seal)}`,
      );
  }
  const open = `${counted(seals.size, "seal")}, ${opened} opened to what was sealed`;
  return judged(check, faults, `${open}, ${seals.size - opened} not revealed`);
}

function isSeal({ kind }: LedgerRecord): boolean {
  return kind === "prediction.sealed" || kind === "measurement.sealed";
}

function digestOf({ payload }: LedgerRecord): string {
  return (payload as Payload<SealKind>).digest;
}

function openedDigest(
  { payload }: LedgerRecord,
  seal: LedgerRecord,
  { ledger, hasher }: { ledger: string; hasher: Hasher },
): string {
  const { nonce, content } = payload as Payload<"prediction.revealed">;
  const { measurand, hypothesis = null } = seal.payload as Payload<"measurement.sealed"> & {
    hypothesis?: string;
  };
  const team = "system" in seal.by ? null : seal.by.team;
  try {
    return sealDigest(hasher, { ledger, team, hypothesis, measurand, nonce, content });
  } catch (error) {
    if (error instanceof LedgerError) return error.message;
    throw error;
  }
}
