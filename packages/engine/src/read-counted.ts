import type { Measurement } from "@weighhouse/campaign/document";
import type { Result } from "@weighhouse/campaign/problem";
import type { EngineState } from "./engine-state";
import type { Frame } from "./frame";
import { readMeasurement } from "./read-measurement";
import { isKept, isSummed, type Reading } from "./readings";
import { drawKey, type Sums } from "./sums";

/** Null for a measurement that is listed and not counted, whatever its form. */
export function readCounted(
  frame: Frame,
  measurement: Measurement,
  place: number,
): Result<Reading | null> {
  const pointer = `/measurements/${place}`;
  const measurand = frame.measurandIndex.get(measurement.measurand);
  if (measurand === undefined) {
    const found = `"${measurement.measurand}"`;
    const allowed = "a measurand of the campaign";
    const at = `${pointer}/measurand`;
    return { ok: false, problems: [{ pointer: at, code: "unknown-key", found, allowed }] };
  }
  if (measurement.setAside !== null || frame.measurands[measurand]!.closed) {
    return { ok: true, value: null };
  }
  return readMeasurement(frame, measurement, pointer);
}

/** Whether the readings of its curve's group have the same draws. */
function isLoadedAlready(sums: Sums, { measurand, loadings }: Reading): boolean {
  return sums.measurands[measurand]!.curves.some(({ draws }) =>
    loadings.every(({ error, batch }) => {
      const draw = sums.index.draws.get(drawKey({ error, batch }));
      return draw !== undefined && draws.includes(draw);
    }),
  );
}

/**
 * A reading that is kept as it is and loads shared errors may need them integrated numerically; one
 * like the last of its measurand needs none that aren't there.
 */
export function mayAddUnknowns(
  { frame, sums }: Pick<EngineState, "frame" | "sums">,
  reading: Reading | null,
): boolean {
  if (reading === null || reading.loadings.length === 0 || isSummed(frame, reading)) return false;
  if (!isKept(frame, reading)) return !isLoadedAlready(sums, reading);
  const last = sums.measurands[reading.measurand]!.kept.at(-1);
  return (
    last === undefined ||
    frame.correlated.has(reading.id) ||
    reading.told.form !== "value" ||
    last.told.form !== "value" ||
    JSON.stringify(last.loadings) !== JSON.stringify(reading.loadings)
  );
}
