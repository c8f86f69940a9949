import type { EntryKind } from "../entries";
import { compareInstants } from "../instants";
import type { RecordOf } from "../ledger-record";
import { CAMPAIGN_PART } from "../parts";
import type { PartContent, PartsBefore } from "../parts";
import type { Problem, ProblemCode } from "../problem";

/** Why an entry may not stand where it stands; null where it may. */
export type Rule<K extends EntryKind> = (
  before: PartsBefore,
  record: RecordOf<K>,
) => Problem | null;

export function fault(pointer: string, code: ProblemCode, found: string, allowed: string): Problem {
  return { pointer, code, found, allowed };
}

export function campaignOf(before: PartsBefore): PartContent {
  return before.get("campaign", CAMPAIGN_PART)!;
}

export function knownMeasurand(before: PartsBefore, key: string, pointer: string): Problem | null {
  if (before.get("measurand", key) !== null) return null;
  return fault(pointer, "unknown-key", `the unknown measurand ${key}`, "a declared measurand");
}

/** Whether a date lies at or before a time; no date never does. */
export function hasPassed(date: unknown, at: string): boolean {
  return typeof date === "string" && compareInstants(date, at) <= 0;
}

export function byATeam(): Problem {
  return fault("", "not-applicable", "an entry in no team's name", "one by a team's member");
}
