import { amendedHypothesis, registeredHypothesis, withRevealed, withSealed } from "./amendment";
import { CampaignError } from "./campaign-error";
import type { EntryKind, MeasurementContent, Payload } from "./entries";
import { brokenRule } from "./entry-rules";
import { earlier } from "./instants";
import { readRecord, teamOf } from "./ledger-record";
import type { LedgerRecord, RecordOf } from "./ledger-record";
import { openedMeasurement, openedPrediction } from "./openings";
import { CAMPAIGN_PART } from "./parts";
import type { Part, PartContent, PartName, PartsBefore } from "./parts";
import { problemLine } from "./problem";
import { selectedMeasurements } from "./selection";

export type { LedgerRecord } from "./ledger-record";

/**
 * What an entry does: the parts that it makes or changes, in order, each with its content from then
 * on. The fold in memory and the projections in the database both take these and nothing else, so
 * they can't disagree.
 *
 * @param before the parts as all earlier entries left them
 * @throws {CampaignError} `not-a-payload` when the payload isn't one of its kind; `rule-broken` for
 *   an entry that may not stand there
 */
export function changesOf(record: LedgerRecord, before: PartsBefore): Part[] {
  const read = readRecord(record);
  const broken = brokenRule(before, read);
  if (broken !== null) {
    throw new CampaignError(
      "rule-broken",
      `entry ${read.seq}, ${read.kind}: ${problemLine(broken)}`,
      { problem: broken },
    );
  }
  const changes = changesByKind[read.kind] as (
    record: RecordOf<EntryKind>,
    before: PartsBefore,
  ) => Part[];
  return changes(read, before);
}

type Changes = { [K in EntryKind]: (record: RecordOf<K>, before: PartsBefore) => Part[] };

const changesByKind: Changes = {
  "campaign.opened": ({ payload }) => [campaignPart({ ...payload, registrationClosed: null })],
  "campaign.amended": ({ payload }, before) => [
    campaignPart({ ...before.get("campaign", CAMPAIGN_PART), ...payload }),
  ],
  "observable.declared": ({ payload }) => [keyed("observable", payload)],
  "measurand.declared": ({ payload }, before) => [
    keyed("measurand", { ...payload, ...datesOf(before.get("measurand", payload.key)) }),
  ],
  "measurand.closed": ({ payload: { key, ...closed } }, before) => [
    keyed("measurand", { ...there(before, "measurand", key), key, closed }),
  ],
  "derived.declared": ({ payload }) => [keyed("derived", payload)],
  "shared-error.declared": ({ payload }) => [keyed("sharedError", payload)],
  "facility.declared": ({ payload }) => [keyed("facility", payload)],
  "team.joined": ({ payload }) => [keyed("team", payload)],
  "measurand.proposed": (record) => [filed("proposal", record)],
  "reference.objected": (record) => [filed("objection", record)],
  "hypothesis.registered": ({ payload, at }) => [
    keyed("hypothesis", registeredHypothesis(payload, at)),
  ],
  "hypothesis.amended": ({ payload, at }, before) => [
    keyed(
      "hypothesis",
      amendedHypothesis(there(before, "hypothesis", payload.key), { content: payload, at }),
    ),
  ],
  "hypothesis.retired": ({ payload: { key, reason }, at }, before) => [
    keyed("hypothesis", { ...there(before, "hypothesis", key), key, retired: { at, reason } }),
  ],
  "prediction.sealed": (record, before) => {
    const { hypothesis, measurand } = record.payload;
    const sealed = withSealed(there(before, "hypothesis", hypothesis), measurand);
    return [sealPart(record, hypothesis), keyed("hypothesis", { ...sealed, key: hypothesis })];
  },
  "prediction.revealed": (record, before) => {
    const seal = there(before, "seal", record.payload.digest);
    const key = String(seal["hypothesis"]);
    const content = withRevealed(there(before, "hypothesis", key), {
      prediction: openedPrediction(record.payload),
      sealedAt: String(seal["at"]),
    });
    return [keyed("hypothesis", { ...content, key }), revealedSeal(record, seal)];
  },
  "registration.closed": ({ at }, before) => {
    const campaign = there(before, "campaign", CAMPAIGN_PART);
    // Closing can only bring registration's end forward.
    const registrationCloses = earlier(instant(campaign["registrationCloses"]), at);
    return [campaignPart({ ...campaign, registrationCloses, registrationClosed: at })];
  },
  "measurements.posted": ({ payload, at }, before) => [
    ...postedMeasurements(payload.measurements, at, before),
    ...payload.correlations.map((correlation): Part => ({
      part: "correlation",
      key: `${correlation.a} ${correlation.b}`,
      content: correlation,
    })),
  ],
  "measurement.corrected": ({ payload: { measurement } }, before) => {
    const old = there(before, "measurement", measurement.id);
    const postedAt = instant(old["postedAt"]);
    const content = {
      ...measurement,
      postedAt,
      // Counting it again is not what a correction says.
      setAside: measurement.setAside ?? old["setAside"],
    };
    return [
      { part: "measurement", key: measurement.id, content },
      ...datedMeasurands([{ ...measurement, postedAt }], before),
    ];
  },
  "measurements.withdrawn": ({ payload, seq, at }, before) => {
    const withdrawn = { seq, at, reason: payload.reason };
    return selectedMeasurements(payload.selection, before).map(({ key, content }) => ({
      part: "measurement",
      key,
      content: { ...content, withdrawn },
    }));
  },
  "measurement.set-aside": ({ payload: { id, reason } }, before) => {
    const content = { ...there(before, "measurement", id), setAside: { reason } };
    return [{ part: "measurement", key: id, content }];
  },
  "measurement.sealed": (record) => [sealPart(record, null)],
  "measurement.revealed": (record, before) => {
    const seal = there(before, "seal", record.payload.digest);
    const opened = openedMeasurement(record.payload, seal);
    return [...postedMeasurements([opened], record.at, before), revealedSeal(record, seal)];
  },
  "remark.made": (record) => [filed("remark", record)],
  "standings.cited": ({ payload: { code, by, note }, seq, at }) => [
    { part: "citation", key: code, content: { code, by, note, seq, at } },
  ],
  "ledger.restored": ({ payload, seq, at }) => [
    { part: "restore", key: String(seq), content: { ...payload, seq, at } },
  ],
};

function keyed(part: PartName, content: PartContent & { key: string }): Part {
  return { part, key: content.key, content };
}

function campaignPart(content: PartContent): Part {
  return { part: "campaign", key: CAMPAIGN_PART, content };
}

/** What has no key of its own is known by its entry. */
function filed(
  part: "proposal" | "objection" | "remark",
  record: RecordOf<"measurand.proposed" | "reference.objected" | "remark.made">,
): Part {
  const { payload, seq, at } = record;
  return { part, key: String(seq), content: { ...payload, seq, at, team: teamOf(record) } };
}

function sealPart(
  record: RecordOf<"prediction.sealed" | "measurement.sealed">,
  hypothesis: string | null,
): Part {
  const { payload, seq, at, by } = record;
  const { digest, measurand, until, keeping } = payload;
  const content = {
    digest,
    of: hypothesis === null ? "measurement" : "prediction",
    hypothesis,
    measurand,
    team: teamOf(record),
    member: "system" in by ? null : by.member,
    until,
    keeping,
    seq,
    at,
    revealed: null,
  };
  return { part: "seal", key: digest, content };
}

function revealedSeal({ seq, at, payload }: RecordOf<EntryKind>, seal: PartContent): Part {
  const { digest } = payload as Payload<"prediction.revealed">;
  return { part: "seal", key: digest, content: { ...seal, revealed: { seq, at } } };
}

function postedMeasurements(
  measurements: MeasurementContent[],
  at: string,
  before: PartsBefore,
): Part[] {
  const posted = measurements.map((measurement) => ({ ...measurement, postedAt: at }));
  return [
    ...posted.map((content): Part => ({ part: "measurement", key: content.id, content })),
    ...datedMeasurands(posted, before),
  ];
}

/** A measurand's first dates are the earliest ever, whatever becomes of the measurement. */
function datedMeasurands(
  measurements: { measurand: string; postedAt: string | null; observedAt: string | null }[],
  before: PartsBefore,
): Part[] {
  const dated = new Map<string, PartContent & { key: string }>();
  for (const { measurand: key, postedAt, observedAt } of measurements) {
    const content: PartContent & { key: string } = dated.get(key) ?? {
      ...there(before, "measurand", key),
      key,
    };
    dated.set(key, {
      ...content,
      firstPostedAt: earlier(instant(content["firstPostedAt"]), postedAt),
      firstObservedAt: earlier(instant(content["firstObservedAt"]), observedAt),
    });
  }
  return [...dated.values()].map((content) => keyed("measurand", content));
}

/** A measurand declared again stays closed where it was, and keeps the dates of its measurements. */
function datesOf(before: PartContent | null) {
  return {
    closed: before?.["closed"] ?? null,
    firstPostedAt: before?.["firstPostedAt"] ?? null,
    firstObservedAt: before?.["firstObservedAt"] ?? null,
  };
}

/** A part that the rules have seen to be there. */
function there(before: PartsBefore, part: PartName, key: string): PartContent {
  const content = before.get(part, key);
  if (content === null) throw new CampaignError("unknown-part", `no ${part} ${key} to change`);
  return content;
}

function instant(value: unknown): string | null {
  return typeof value === "string" ? value : null;
}
