import { amendedHypothesis as amended, storedHypothesis } from "../amendment";
import { teamOf } from "../ledger-record";
import type { RecordOf } from "../ledger-record";
import type { PartContent, PartsBefore } from "../parts";
import type { Problem } from "../problem";
import { dataSealedBy } from "./party";
import { fault } from "./rule";

export function registeredHypothesis(
  before: PartsBefore,
  record: RecordOf<"hypothesis.registered">,
): Problem | null {
  const { key, team, predictions } = record.payload;
  if (before.get("hypothesis", key) !== null) {
    return fault("/key", "duplicate", key, "a key that no hypothesis has");
  }
  // In no team's name are those that a coordinator imports with a document.
  const own = teamOf(record);
  if (own !== null && team !== own) return fault("/team", "contradiction", String(team), own);
  const known = dataSealedBy(before, record);
  const index = predictions.findIndex(({ measurand }) => known.has(measurand));
  return index < 0 ? null : knowsTheData(index, predictions[index]!.measurand);
}

export function amendedHypothesis(
  before: PartsBefore,
  record: RecordOf<"hypothesis.amended">,
): Problem | null {
  const { payload, at } = record;
  const broken = ownOpenHypothesis(before, record, payload.key);
  if (broken !== null) return broken;
  const old = before.get("hypothesis", payload.key)!;
  if (payload.team !== (old["team"] ?? null)) {
    return fault(
      "/team",
      "contradiction",
      String(payload.team),
      `${String(old["team"])}, as it was`,
    );
  }
  return (
    withheldFault(old, payload) ??
    sealedFault(old, payload) ??
    knownDataFault(before, record, amended(old, { content: payload, at }).predictions)
  );
}

export function retiredHypothesis(
  before: PartsBefore,
  record: RecordOf<"hypothesis.retired">,
): Problem | null {
  return ownOpenHypothesis(before, record, record.payload.key);
}

/** A hypothesis is its own team's to change, until it is retired. */
export function ownOpenHypothesis(
  before: PartsBefore,
  record: Parameters<typeof teamOf>[0],
  key: string,
  pointer = "/key",
): Problem | null {
  const hypothesis = before.get("hypothesis", key);
  if (hypothesis === null) {
    return fault(
      pointer,
      "unknown-key",
      `the unknown hypothesis ${key}`,
      "a registered hypothesis",
    );
  }
  if ((hypothesis["retired"] ?? null) !== null) {
    return fault(pointer, "contradiction", `${key}, which is retired`, "a hypothesis that is not");
  }
  const team = (hypothesis["team"] ?? null) as string | null;
  if (!("system" in record.by) && team === teamOf(record)) return null;
  const found = "system" in record.by ? "the system" : `team ${String(record.by.team)}`;
  return fault(pointer, "contradiction", `${key} by ${found}`, `by its own team, ${String(team)}`);
}

type Amendment = RecordOf<"hypothesis.amended">["payload"];

/** Only a seal withholds: else what turned out wrong could be made to say nothing. */
function withheldFault(old: PartContent, payload: Amendment): Problem | null {
  const before = new Set(storedHypothesis(old).withheld);
  const predicted = new Set(payload.predictions.map(({ measurand }) => measurand));
  for (const [index, key] of payload.withheld.entries()) {
    const pointer = `/withheld/${index}`;
    if (!before.has(key)) return fault(pointer, "contradiction", key, "what was withheld before");
    if (predicted.has(key)) return fault(pointer, "contradiction", key, "what isn't predicted");
  }
  return null;
}

function sealedFault(old: PartContent, payload: Amendment): Problem | null {
  const sealed = new Set(storedHypothesis(old).sealed);
  const index = payload.predictions.findIndex(({ measurand }) => sealed.has(measurand));
  if (index < 0) return null;
  const found = `a prediction of ${payload.predictions[index]!.measurand}, which is sealed`;
  return fault(`/predictions/${index}`, "contradiction", found, "it once its seal is open");
}

function knownDataFault(
  before: PartsBefore,
  record: RecordOf<"hypothesis.amended">,
  predictions: { measurand: string; registeredAt: string | null }[],
): Problem | null {
  const known = dataSealedBy(before, record);
  const index = predictions.findIndex(
    ({ measurand, registeredAt }) => registeredAt === record.at && known.has(measurand),
  );
  return index < 0 ? null : knowsTheData(index, predictions[index]!.measurand);
}

function knowsTheData(index: number, measurand: string): Problem {
  const found = `a prediction of ${measurand} by those who sealed a measurement of it`;
  return fault(`/predictions/${index}`, "contradiction", found, "it once that seal is open");
}
