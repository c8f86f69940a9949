import { describe, expect, test } from "vitest";
import type { CampaignDocument } from "@weighhouse/campaign/document";
import { compileFrame } from "./compile-frame";
import type { EngineState } from "./engine-state";
import { evidencesOf } from "./evidences";
import { readCounted } from "./read-counted";
import { createState, standingsOf } from "./state";
import { addReading, createSums } from "./sums";
import { createTally, noteMeasurement } from "./tally";
import { randomCurves } from "./testing/random-curves";
import { expectSame } from "./testing/same-numbers";

/** Every reading as a row of its own: nothing is put into factors. */
function rowByRow(document: CampaignDocument): EngineState {
  const compiled = compileFrame(document);
  if (!compiled.ok) throw new Error(JSON.stringify(compiled.problems));
  const frame = compiled.value;
  for (const measurand of frame.measurands) measurand.designs = [];
  const state = { frame, sums: createSums(frame.measurands), tally: createTally(frame) };
  for (const measurement of document.measurements) {
    const read = readCounted(frame, measurement, state.tally.size);
    if (!read.ok) throw new Error(JSON.stringify(read.problems));
    noteMeasurement(state.tally, frame, measurement, read.value);
    if (read.value !== null) addReading(state.sums, read.value, frame);
  }
  return state;
}

function stateOf(document: CampaignDocument): EngineState {
  const made = createState(document);
  if (!made.ok) throw new Error(JSON.stringify(made.problems));
  return made.value;
}

const seeds = Array.from({ length: 10 }, (_, i) => i + 1);

describe("a curve scored from its triangular factors", () => {
  test.each(seeds)("says what its readings say one by one (%i)", (seed) => {
    const document = randomCurves(seed);
    const state = stateOf(document);
    expect(state.sums.measurands.every(({ kept }) => kept.length === 0)).toBe(true);
    expectSame(standingsOf(state), standingsOf(rowByRow(document)));
  });

  test.each(seeds)("keeps the digits of values near 2,460,000 (%i)", (seed) => {
    const document = randomCurves(seed, { level: 2_460_000, unit: 1e-4 });
    expectSame(standingsOf(stateOf(document)), standingsOf(rowByRow(document)));
  });

  test.each(seeds.slice(0, 4))("goes with readings and roles that ask for rows (%i)", (seed) => {
    const document = randomCurves(seed, { level: 3, count: 12, mixed: true });
    expectSame(evidencesOf(stateOf(document)), evidencesOf(rowByRow(document)), 1e-8);
  });
});
