import { CampaignError } from "./campaign-error";
import { amendedHypothesis } from "./amendment";
import { entryKinds } from "./entries";
import type { EntryKind, HypothesisContent, Payload } from "./entries";
import { earlier } from "./instants";
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

/** There is one campaign in a document, so its part needs no key of its own. */
export const CAMPAIGN_PART = "campaign";

/** What a part holds, as JSON: its fields in the document, and what was claimed of its dates. */
export type PartContent = Record<string, unknown>;

/**
 * What one entry does to one part of the document. `put` gives a part, or the next version of it;
 * `patch` changes one that must be there. The fold in memory and the projections in the database
 * both apply changes by `contentAfter` and nothing else, so they can't disagree.
 */
export type Change = { op: "put" | "patch"; part: PartName; key: string; content: PartContent };

/**
 * What an entry does to the parts of the document, in order.
 *
 * @throws {CampaignError} `not-a-payload` when the payload isn't one of its kind
 */
export function changesOf(record: LedgerRecord): Change[] {
  if (!entryKinds.includes(record.kind)) {
    throw new CampaignError("not-a-payload", `entry ${record.seq}: unknown kind ${record.kind}`);
  }
  return changesByKind[record.kind](record);
}

/**
 * The content of a part after a change.
 *
 * @param before the part's content so far, null if there is none. Measurements and correlations
 *   that are put don't need it: their ids are new.
 * @throws {CampaignError} `unknown-part` for a patch of a part that isn't there
 */
export function contentAfter(change: Change, before: PartContent | null): PartContent {
  if (change.op === "put") return putContent(change, before);
  if (before === null) {
    throw new CampaignError("unknown-part", `no ${change.part} ${change.key} to change`);
  }
  switch (change.part) {
    case "measurand":
      return { ...before, ...change.content, ...earliest(before, change.content) };
    case "hypothesis":
      return amendedHypothesis(before, change.content);
    case "campaign":
      return { ...before, ...change.content, ...sooner(before, change.content) };
    default:
      return { ...before, ...change.content };
  }
}

/** A measurand declared again keeps the dates of the measurements that it already had. */
function putContent(change: Change, before: PartContent | null): PartContent {
  if (change.part !== "measurand" || before === null) return change.content;
  return {
    ...change.content,
    closed: before["closed"] ?? null,
    ...earliest(before, change.content),
  };
}

function earliest(before: PartContent, after: PartContent): PartContent {
  return {
    firstPostedAt: earlier(instant(before["firstPostedAt"]), instant(after["firstPostedAt"])),
    firstObservedAt: earlier(instant(before["firstObservedAt"]), instant(after["firstObservedAt"])),
  };
}

/** Closing can only bring registration's end forward; amending the campaign sets it anew. */
function sooner(before: PartContent, after: PartContent): PartContent {
  if ("rule" in after || !("registrationCloses" in after)) return {};
  return {
    registrationCloses: earlier(
      instant(before["registrationCloses"]),
      instant(after["registrationCloses"]),
    ),
  };
}

function instant(value: unknown): string | null {
  return typeof value === "string" ? value : null;
}

type ChangesOfKind = (record: LedgerRecord) => Change[];

const changesByKind: Record<EntryKind, ChangesOfKind> = {
  "campaign.opened": (record) => {
    const content = payloadOf("campaign.opened", record);
    return [{ op: "put", part: "campaign", key: CAMPAIGN_PART, content }];
  },
  "campaign.amended": (record) => {
    const content = payloadOf("campaign.amended", record);
    return [{ op: "patch", part: "campaign", key: CAMPAIGN_PART, content }];
  },
  "observable.declared": (record) => [put("observable", payloadOf("observable.declared", record))],
  "measurand.declared": (record) => {
    const content = payloadOf("measurand.declared", record);
    return [
      put("measurand", { ...content, closed: null, firstPostedAt: null, firstObservedAt: null }),
    ];
  },
  "measurand.closed": (record) => {
    const { key, ...closed } = payloadOf("measurand.closed", record);
    return [{ op: "patch", part: "measurand", key, content: { closed } }];
  },
  "derived.declared": (record) => [put("derived", payloadOf("derived.declared", record))],
  "shared-error.declared": (record) => [
    put("sharedError", payloadOf("shared-error.declared", record)),
  ],
  "facility.declared": (record) => [put("facility", payloadOf("facility.declared", record))],
  "team.joined": (record) => [put("team", payloadOf("team.joined", record))],
  "hypothesis.registered": (record) => [
    put("hypothesis", registeredHypothesis(payloadOf("hypothesis.registered", record), record.at)),
  ],
  "hypothesis.amended": (record) => {
    const content = registeredHypothesis(payloadOf("hypothesis.amended", record), record.at);
    return [{ op: "patch", part: "hypothesis", key: content.key, content }];
  },
  "registration.closed": (record) => {
    payloadOf("registration.closed", record);
    const content = { registrationCloses: record.at };
    return [{ op: "patch", part: "campaign", key: CAMPAIGN_PART, content }];
  },
  "measurements.posted": (record) => postedMeasurements(record),
  "measurement.set-aside": (record) => {
    const { id, reason } = payloadOf("measurement.set-aside", record);
    return [{ op: "patch", part: "measurement", key: id, content: { setAside: { reason } } }];
  },
};

function payloadOf<K extends EntryKind>(kind: K, record: LedgerRecord): Payload<K> {
  const read = readPayload(kind, record.payload);
  if (read.ok) return read.value;
  const problems = read.problems.map(problemLine).join("\n");
  throw new CampaignError("not-a-payload", `entry ${record.seq}, ${kind}:\n${problems}`);
}

function put(part: PartName, content: PartContent & { key: string }): Change {
  return { op: "put", part, key: content.key, content };
}

/** A hypothesis as of its entry: it and all of its predictions take the entry's time. */
function registeredHypothesis(content: HypothesisContent, at: string) {
  const predictions = content.predictions.map((prediction) => ({
    ...prediction,
    registeredAt: at,
  }));
  return { ...content, predictions, registeredAt: at };
}

function postedMeasurements(record: LedgerRecord): Change[] {
  const { measurements, correlations } = payloadOf("measurements.posted", record);
  const changes: Change[] = [];
  const firstObserved = new Map<string, string | null>();
  for (const measurement of measurements) {
    const { id, measurand, observedAt } = measurement;
    const content = { ...measurement, postedAt: record.at };
    changes.push({ op: "put", part: "measurement", key: id, content });
    firstObserved.set(measurand, earlier(firstObserved.get(measurand) ?? null, observedAt));
  }
  for (const [measurand, firstObservedAt] of firstObserved) {
    const content = { firstPostedAt: record.at, firstObservedAt };
    changes.push({ op: "patch", part: "measurand", key: measurand, content });
  }
  for (const correlation of correlations) {
    const key = `${correlation.a} ${correlation.b}`;
    changes.push({ op: "put", part: "correlation", key, content: correlation });
  }
  return changes;
}
