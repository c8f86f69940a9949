import type { EntryKind } from "./entries";

/** An entry with its payload, as the fold takes it. */
export type LedgerRecord = {
  seq: number;
  at: string;
  by: { member: string; team: string | null } | { system: true };
  kind: EntryKind;
  payload: unknown;
};

export const partNames = [
  "campaign",
  "observable",
  "measurand",
  "derived",
  "sharedError",
  "facility",
  "team",
  "hypothesis",
  "measurement",
  "correlation",
] as const;
export type PartName = (typeof partNames)[number];

/** What a part holds, as JSON: a field of the document, and dates that only the ledger knows. */
export type PartContent = Record<string, unknown>;

/**
 * What one entry does to one part of the document. `put` gives a part (or a new version of it);
 * `patch` changes one that is there. Both are applied by `contentAfter` and by nothing else.
 */
export type Change = { op: "put" | "patch"; part: PartName; key: string; content: PartContent };
