import type { CampaignDocument, Measurement } from "@weighhouse/campaign/document";
import type { Problem, Result } from "@weighhouse/campaign/problem";
import type { Standings } from "@weighhouse/campaign/standings";
import { compileFrame } from "./compile-frame";
import type { EngineState } from "./engine-state";
import { openWorkspace } from "./open-workspace";
import { unscorableParts } from "./model/unscorable";
import { mayAddUnknowns, readCounted } from "./read-counted";
import type { Reading } from "./readings";
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
 * What becomes of those already in is for `reviseMeasurements`; anything else (a new hypothesis, ...)
 * needs `createState` again.
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
  if (problems.length === 0 && readings.some((one) => mayAddUnknowns(state, one))) {
    problems.push(...unscorableWith(state, measurements, readings));
  }
  if (problems.length > 0) return { ok: false, problems };
  measurements.forEach((measurement, i) => take(state, measurement, readings[i]!));
  return { ok: true, value: state };
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
  noteMeasurement(tally, frame, measurement, reading);
  if (reading !== null) addReading(sums, reading, frame);
}

/** The standings document of a state. */
export function standingsOf(state: EngineState, options: ScoreOptions = {}): Standings {
  return standings(openWorkspace(state), state.tally, options);
}

export type { EngineState } from "./engine-state";
export { remakeMeasurands, reviseMeasurements, type Revision } from "./revisions";
export { restoreState, serialiseState } from "./state-text";
