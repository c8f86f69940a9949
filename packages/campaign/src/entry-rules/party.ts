import { teamOf } from "../ledger-record";
import type { LedgerRecord } from "../ledger-record";
import type { PartContent, PartsBefore } from "../parts";

/** Whether an entry comes from whom a seal binds: its team, or the member where it names none. */
export function isOfParty(record: Pick<LedgerRecord, "by">, seal: PartContent): boolean {
  if ("system" in record.by) return false;
  const team = teamOf(record);
  return team === seal["team"] && (team !== null || record.by.member === seal["member"]);
}

/**
 * The measurands of which the author or his team holds a measurement under an unopened seal: of
 * these they know what nobody else does, and file no predictions meanwhile.
 */
export function dataSealedBy(before: PartsBefore, record: Pick<LedgerRecord, "by">): Set<string> {
  const known = new Set<string>();
  for (const { content } of before.all("seal")) {
    if (content["of"] === "measurement" && content["revealed"] === null) {
      if (isOfParty(record, content)) known.add(String(content["measurand"]));
    }
  }
  return known;
}
