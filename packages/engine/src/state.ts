import type { CampaignDocument, Measurement } from "@weighhouse/campaign/document";
import type { Problem, Result } from "@weighhouse/campaign/problem";
import type { Standings } from "@weighhouse/campaign/standings";
import { compileFrame } from "./compile-frame";
import type { EngineState } from "./engine-state";
import type { Frame } from "./frame";
import { openWorkspace } from "./open-workspace";
import { readMeasurement } from "./read-measurement";
import { unscorableParts } from "./model/unscorable";
import { isSummed, type Reading } from "./readings";
import type { ScoreOptions } from "./score-options";
import { standings } from "./standings";
import { restoreState, serialiseState } from "./state-text";
import { addReading, createSums } from "./sums";
import { createTally, noteMeasurement } from "./tally";

/** The state of a campaign with all measurements of its document in it. */
export function createState(document: CampaignDocument): Result<EngineState> {
  const compiled = compileFrame(document);
  if (!compiled.ok) return compiled;
  const frame = compiled.value;
  const state = { frame, sums: createSums(frame.measurands), tally: createTally(frame) };
  const problems: Problem[] = [];
  // A state of its own is thrown away when something is refused, so readings needn't be kept.
  for (const measurement of document.measurements) {
    const read = readCounted(frame, measurement, state.tally.size);
    if (!read.ok) problems.push(...read.problems);
    if (problems.length === 0) take(state, measurement, read.ok ? read.value : null);
    else state.tally.size += 1;
  }
  if (problems.length === 0) problems.push(...unscorableParts(state));
  return problems.length > 0 ? { ok: false, problems } : { ok: true, value: state };
}

/**
 * Takes further measurements in, O(k^2) each. The state given is used up: go on with the one returned.
 * When a measurement is refused nothing has changed, and the state given is still good.
 * Anything but new measurements (a set-aside, a new hypothesis, ...) needs `createState` again.
 * Problems' pointers count on from the measurements already in: `/measurements/{size + i}`.
 */
export function addMeasurements(
  state: EngineState,
  measurements: readonly Measurement[],
): Result<EngineState> {
  const { frame, tally } = state;
  const readings: (Reading | null)[] = [];
  const problems: Problem[] = [];
  measurements.forEach((measurement, i) => {
    const read = readCounted(frame, measurement, tally.size + i);
    if (read.ok) readings.push(read.value);
    else problems.push(...read.problems);
  });
  if (problems.length === 0 && readings.some((one) => mayAddUnknowns(frame, one))) {
    problems.push(...unscorableWith(state, measurements, readings));
  }
  if (problems.length > 0) return { ok: false, problems };
  measurements.forEach((measurement, i) => take(state, measurement, readings[i]!));
  return { ok: true, value: state };
}

/** A reading that is kept as it is and loads shared errors may need them integrated numerically. */
function mayAddUnknowns(frame: Frame, reading: Reading | null): boolean {
  return reading !== null && reading.loadings.length > 0 && !isSummed(frame, reading);
}

/** Tried on a copy: the state given must stay good. */
function unscorableWith(
  state: EngineState,
  measurements: readonly Measurement[],
  readings: readonly (Reading | null)[],
): Problem[] {
  const copy = restoreState(serialiseState(state))!;
  measurements.forEach((measurement, i) => take(copy, measurement, readings[i]!));
  return unscorableParts(copy);
}

function take(
  { frame, sums, tally }: EngineState,
  measurement: Measurement,
  reading: Reading | null,
): void {
  noteMeasurement(tally, frame, { measurement, reading });
  if (reading !== null) addReading(sums, reading, frame);
}

/** Null for a measurement that is listed and not counted, whatever its form. */
function readCounted(
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

/** The standings document of a state. */
export function standingsOf(state: EngineState, options: ScoreOptions = {}): Standings {
  return standings(openWorkspace(state), state.tally, options);
}

export type { EngineState } from "./engine-state";
export { restoreState, serialiseState } from "./state-text";
