import { storedHypothesis } from "../amendment";
import { compareInstants } from "../instants";
import type { LedgerRecord, RecordOf } from "../ledger-record";
import { contentFaults, openedDigest, openedMeasurement } from "../openings";
import type { PartContent, PartsBefore } from "../parts";
import type { Problem } from "../problem";
import { ownOpenHypothesis } from "./hypotheses";
import { newMeasurement } from "./measurements";
import { dataSealedBy, isOfParty } from "./party";
import { campaignOf, fault, hasPassed, knownMeasurand } from "./rule";

export function sealedPrediction(
  before: PartsBefore,
  record: RecordOf<"prediction.sealed">,
): Problem | null {
  const { hypothesis: key, measurand } = record.payload;
  const broken = newSeal(before, record) ?? ownOpenHypothesis(before, record, key, "/hypothesis");
  if (broken !== null) return broken;
  if (before.get("measurand", measurand) === null && before.get("derived", measurand) === null) {
    return fault("/measurand", "unknown-key", measurand, "a declared measurand");
  }
  const { predictions, withheld } = storedHypothesis(before.get("hypothesis", key)!);
  if ([...predictions.map((one) => one.measurand), ...withheld].includes(measurand)) {
    const found = `${measurand}, which it predicts or withholds already`;
    return fault("/measurand", "contradiction", found, "another measurand");
  }
  if (!dataSealedBy(before, record).has(measurand)) return null;
  const found = `${measurand}, by those who sealed a measurement of it`;
  return fault("/measurand", "contradiction", found, "it once that seal is open");
}

export function sealedMeasurement(
  before: PartsBefore,
  record: RecordOf<"measurement.sealed">,
): Problem | null {
  return newSeal(before, record) ?? knownMeasurand(before, record.payload.measurand, "/measurand");
}

export function revealedPrediction(
  before: PartsBefore,
  record: RecordOf<"prediction.revealed">,
): Problem | null {
  return openedSeal(before, record, "prediction");
}

export function revealedMeasurement(
  before: PartsBefore,
  record: RecordOf<"measurement.revealed">,
): Problem | null {
  const broken = openedSeal(before, record, "measurement");
  if (broken !== null) return broken;
  const seal = before.get("seal", record.payload.digest)!;
  const opened = openedMeasurement(record.payload, seal);
  if (opened.team !== seal["team"]) {
    return fault("/content/team", "contradiction", String(opened.team), String(seal["team"]));
  }
  return newMeasurement(before, opened, "/content");
}

type Sealing = RecordOf<"prediction.sealed" | "measurement.sealed">;
type Opening = RecordOf<"prediction.revealed" | "measurement.revealed">;

function newSeal(before: PartsBefore, { payload, at, by }: Sealing): Problem | null {
  const { digest, until } = payload;
  if ("system" in by) return fault("", "not-applicable", "a seal by the system", "one by a member");
  if (before.get("seal", digest) !== null) {
    return fault("/digest", "duplicate", digest, "a digest that nobody sealed yet");
  }
  return compareInstants(until, at) > 0
    ? null
    : fault("/until", "out-of-range", until, `a time after ${at}, that of the sealing`);
}

/** A seal is opened once, by those whom it binds, in time, with what its digest is of. */
function openedSeal(
  before: PartsBefore,
  record: Opening,
  of: "prediction" | "measurement",
): Problem | null {
  const { payload } = record;
  const seal = before.get("seal", payload.digest);
  if (seal === null || seal["of"] !== of) {
    return fault("/digest", "unknown-key", payload.digest, `the digest of a sealed ${of}`);
  }
  if (seal["revealed"] !== null) {
    return fault("/digest", "contradiction", "a seal that is open already", "opening it once");
  }
  const broken = openerFault(record, seal);
  if (broken !== null) return broken;
  const ledger = String(campaignOf(before)["ledger"]);
  const digest = openedDigest(payload, seal, ledger);
  if (digest !== payload.digest) {
    const found = `content, nonce and seal of digest ${digest}`;
    return fault("/content", "contradiction", found, `those of digest ${payload.digest}`);
  }
  const [unread] = contentFaults(of, payload.content);
  if (unread !== undefined) return unread;
  return payload.content["measurand"] === seal["measurand"]
    ? null
    : fault(
        "/content/measurand",
        "contradiction",
        String(payload.content["measurand"]),
        String(seal["measurand"]),
      );
}

/** The server opens what it holds, from its time on; those whom it binds open theirs until then. */
function openerFault(
  { by, at }: Pick<LedgerRecord, "by" | "at">,
  seal: PartContent,
): Problem | null {
  const until = String(seal["until"]);
  if ("system" in by) {
    return seal["keeping"] === "held" && hasPassed(until, at)
      ? null
      : fault(
          "",
          "contradiction",
          `the system's opening at ${at}`,
          `that of a held seal, from ${until}`,
        );
  }
  if (!isOfParty({ by }, seal)) {
    const found = `an opening by team ${String(by.team)}`;
    return fault("", "contradiction", found, `one by team ${String(seal["team"])}, who sealed it`);
  }
  return compareInstants(at, until) <= 0
    ? null
    : fault("", "contradiction", `an opening at ${at}`, `one until ${until}, as was sealed`);
}
