import { CampaignError } from "./campaign-error";
import { entryKinds } from "./entries";
import type { EntryKind, Payload } from "./entries";
import { readPayload } from "./payloads";
import { problemLine } from "./problem";

/** An entry with its payload, as the fold takes it. */
export type LedgerRecord = {
  seq: number;
  at: string;
  by: { member: string; team: string | null } | { system: true };
  kind: EntryKind;
  payload: unknown;
};

/** An entry of one kind whose payload was read. */
export type RecordOf<K extends EntryKind> = Omit<LedgerRecord, "kind" | "payload"> & {
  kind: K;
  payload: Payload<K>;
};

/** @throws {CampaignError} `not-a-payload` when the payload isn't one of its kind */
export function readRecord(record: LedgerRecord): RecordOf<EntryKind> {
  const { seq, kind } = record;
  if (!entryKinds.includes(kind)) {
    throw new CampaignError("not-a-payload", `entry ${seq}: unknown kind ${kind}`);
  }
  const read = readPayload(kind, record.payload);
  if (read.ok) return { ...record, payload: read.value };
  const problems = read.problems.map(problemLine).join("\n");
  throw new CampaignError("not-a-payload", `entry ${seq}, ${kind}:\n${problems}`);
}

/** The team in whose name the entry was made. */
export function teamOf({ by }: Pick<LedgerRecord, "by">): string | null {
  return "system" in by ? null : by.team;
}
