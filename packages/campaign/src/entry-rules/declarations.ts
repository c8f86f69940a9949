import type { RecordOf } from "../ledger-record";
import { teamOf } from "../ledger-record";
import type { PartContent, PartName, PartsBefore } from "../parts";
import type { Problem } from "../problem";
import { sortedJson } from "../sorted-json";
import { byATeam, campaignOf, fault, hasPassed, knownMeasurand } from "./rule";

/** A declaration may be worded anew and is never another: what hangs on it was filed as it stood. */
export function declaredAgain(
  before: PartsBefore,
  part: PartName,
  payload: PartContent & { key: string },
): Problem | null {
  const old = before.get(part, payload.key);
  return old === null ? null : changedField(old, payload);
}

function changedField(old: PartContent, payload: PartContent): Problem | null {
  for (const [field, value] of Object.entries(payload)) {
    if (field === "title" || field === "claimed") continue;
    if (sortedJson(value) === sortedJson(old[field])) continue;
    const allowed = `${sortedJson(old[field])}, as it was declared`;
    return fault(`/${field}`, "contradiction", sortedJson(value), allowed);
  }
  return null;
}

/** Until its first measurement a measurand may be put right; from then on it stands as it is. */
export function declaredMeasurand(
  before: PartsBefore,
  { payload }: RecordOf<"measurand.declared">,
): Problem | null {
  if (before.get("derived", payload.key) !== null) {
    return fault("/key", "duplicate", payload.key, "a key that no derived value has");
  }
  const old = before.get("measurand", payload.key);
  return old !== null && isMeasured(old) ? changedField(old, payload) : null;
}

export function closedMeasurand(
  before: PartsBefore,
  { payload: { key, replacedBy } }: RecordOf<"measurand.closed">,
): Problem | null {
  const unknown = knownMeasurand(before, key, "/key");
  if (unknown !== null) return unknown;
  if ((before.get("measurand", key)!["closed"] ?? null) !== null) {
    return fault("/key", "contradiction", `${key}, which is closed already`, "an open measurand");
  }
  if (replacedBy === null) return null;
  return replacedBy === key
    ? fault("/replacedBy", "contradiction", replacedBy, "another measurand")
    : knownMeasurand(before, replacedBy, "/replacedBy");
}

export function proposedMeasurand(
  before: PartsBefore,
  record: RecordOf<"measurand.proposed">,
): Problem | null {
  const { key } = record.payload.measurand;
  if (teamOf(record) === null) return byATeam();
  const taken = before.get("measurand", key) ?? before.get("derived", key);
  return taken === null
    ? null
    : fault("/measurand/key", "duplicate", key, "a key that nothing in the campaign has yet");
}

export function objectedReference(
  before: PartsBefore,
  record: RecordOf<"reference.objected">,
): Problem | null {
  const { measurand } = record.payload;
  if (teamOf(record) === null) return byATeam();
  const closes = campaignOf(before)["registrationCloses"];
  if (hasPassed(closes, record.at)) {
    const found = `an objection at ${record.at}`;
    return fault(
      "",
      "contradiction",
      found,
      `one before registration's close at ${sortedJson(closes)}`,
    );
  }
  return knownMeasurand(before, measurand, "/measurand");
}

/** Whether a measurement was ever posted on it, withdrawn and corrected ones too. */
export function isMeasured(measurand: PartContent): boolean {
  return (measurand["firstPostedAt"] ?? null) !== null;
}
