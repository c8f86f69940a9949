import type { MeasurementContent } from "../entries";
import type { RecordOf } from "../ledger-record";
import type { PartsBefore } from "../parts";
import type { Problem } from "../problem";
import { isCurrent, selectedMeasurements } from "../selection";
import { fault, knownMeasurand } from "./rule";

export function postedMeasurements(
  before: PartsBefore,
  { payload: { measurements, correlations } }: RecordOf<"measurements.posted">,
): Problem | null {
  const posted = new Set<string>();
  for (const [index, measurement] of measurements.entries()) {
    const pointer = `/measurements/${index}`;
    const broken = newMeasurement(before, measurement, pointer);
    if (broken !== null) return broken;
    if (posted.has(measurement.id)) {
      return fault(`${pointer}/id`, "duplicate", measurement.id, "each id once");
    }
    posted.add(measurement.id);
  }
  for (const [index, correlation] of correlations.entries()) {
    for (const end of ["a", "b"] as const) {
      const id = correlation[end];
      if (posted.has(id) || isCurrent(before.get("measurement", id))) continue;
      const pointer = `/correlations/${index}/${end}`;
      return fault(pointer, "unknown-key", id, "a measurement that is there");
    }
  }
  return null;
}

/** An id names one measurement for ever: what was withdrawn doesn't come back under it. */
export function newMeasurement(
  before: PartsBefore,
  { id, measurand }: MeasurementContent,
  pointer: string,
): Problem | null {
  if (before.get("measurement", id) !== null) {
    return fault(`${pointer}/id`, "duplicate", id, "an id that was never posted");
  }
  return knownMeasurand(before, measurand, `${pointer}/measurand`);
}

export function correctedMeasurement(
  before: PartsBefore,
  { payload: { measurement } }: RecordOf<"measurement.corrected">,
): Problem | null {
  return (
    currentMeasurement(before, measurement.id, "/measurement/id") ??
    knownMeasurand(before, measurement.measurand, "/measurement/measurand")
  );
}

export function withdrawnMeasurements(
  before: PartsBefore,
  { payload: { selection } }: RecordOf<"measurements.withdrawn">,
): Problem | null {
  if (selection.by === "ids") {
    const ids = new Set<string>();
    for (const [index, id] of selection.ids.entries()) {
      const pointer = `/selection/ids/${index}`;
      if (ids.has(id)) return fault(pointer, "duplicate", id, "each id once");
      const broken = currentMeasurement(before, id, pointer);
      if (broken !== null) return broken;
      ids.add(id);
    }
    return null;
  }
  return selectedMeasurements(selection, before).length > 0
    ? null
    : fault("/selection", "unknown-key", "no measurement", "a range with a measurement or more");
}

export function setAsideMeasurement(
  before: PartsBefore,
  { payload: { id } }: RecordOf<"measurement.set-aside">,
): Problem | null {
  const broken = currentMeasurement(before, id, "/id");
  if (broken !== null) return broken;
  return (before.get("measurement", id)!["setAside"] ?? null) === null
    ? null
    : fault("/id", "contradiction", `${id}, which is set aside already`, "a counted measurement");
}

function currentMeasurement(before: PartsBefore, id: string, pointer: string): Problem | null {
  const content = before.get("measurement", id);
  if (content === null) return fault(pointer, "unknown-key", id, "a measurement that is there");
  return isCurrent(content)
    ? null
    : fault(pointer, "contradiction", `${id}, which is withdrawn`, "a measurement that is not");
}
