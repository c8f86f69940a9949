import type { CampaignDocument } from "@weighhouse/campaign/document";
import { evidencesOf } from "@weighhouse/engine/evidences";
import {
  addMeasurements,
  createState,
  standingsOf,
  type EngineState,
} from "@weighhouse/engine/state";
import { inventedCampaign, type Size } from "./invented-campaign";
import { plainDenseEvidence } from "./plain-dense";

/**
 * `npm run bench`: what a further measurement costs as a campaign grows, scoring against a plain
 * dense computation, and a large campaign. Times are medians; ratios are what to look at, since
 * they hang less on the machine.
 */
function medianMs(repeats: number, run: () => unknown): number {
  const times = Array.from({ length: repeats }, () => {
    const start = performance.now();
    run();
    return performance.now() - start;
  });
  return times.sort((a, b) => a - b)[Math.floor(repeats / 2)]!;
}

function stateOf(document: CampaignDocument): EngineState {
  const state = createState(document);
  if (!state.ok) throw new Error(JSON.stringify(state.problems.slice(0, 3)));
  return state.value;
}

const shape = { measurands: 10, errors: 4, hypotheses: 5 };

/** Adding `many` one at a time to a campaign of n, then reading off every evidence. */
function further(n: number, perBatch: number) {
  const many = 200;
  const whole = inventedCampaign({ ...shape, measurements: n + many, perBatch });
  const state = stateOf({ ...whole, measurements: whole.measurements.slice(0, n) });
  evidencesOf(state);
  const rest = whole.measurements.slice(n);
  const add = medianMs(1, () => {
    for (const measurement of rest) addMeasurements(state, [measurement]);
  });
  return { add: add / many, point: medianMs(9, () => evidencesOf(state)) };
}

function furtherMeasurements(title: string, perBatch: number): void {
  further(1000, perBatch);
  console.log(`\nOne more measurement, ${title}`);
  console.log("       N   add (us)  ratio   all evidences (ms)  ratio");
  let first: { add: number; point: number } | null = null;
  for (const n of [1000, 10_000, 100_000]) {
    const now = further(n, perBatch);
    first ??= now;
    const columns = [
      String(n).padStart(8),
      (1000 * now.add).toFixed(1).padStart(10),
      (now.add / first.add).toFixed(2).padStart(6),
      now.point.toFixed(2).padStart(20),
      (now.point / first.point).toFixed(2).padStart(6),
    ];
    console.log(columns.join(" "));
  }
}

function againstDense(): void {
  console.log("\nEvidence of one hypothesis against a plain N x N computation");
  console.log("       N   dense (ms)   engine, whole campaign (ms)   dense / engine");
  for (const n of [250, 500, 1000, 2000]) {
    const size: Size = { ...shape, hypotheses: 1, measurements: n, perBatch: 50 };
    const document = inventedCampaign(size);
    const dense = medianMs(3, () => plainDenseEvidence(document, 0));
    const engine = medianMs(9, () => evidencesOf(stateOf(document)));
    const columns = [
      String(n).padStart(8),
      dense.toFixed(1).padStart(12),
      engine.toFixed(2).padStart(29),
      (dense / engine).toFixed(0).padStart(16),
    ];
    console.log(columns.join(" "));
  }
}

function large(title: string, perBatch: number): void {
  const size = { measurements: 200_000, measurands: 40, errors: 12, hypotheses: 20, perBatch };
  const document = inventedCampaign(size);
  const build = medianMs(3, () => stateOf(document));
  const state = stateOf(document);
  const point = medianMs(3, () => evidencesOf(state));
  const standings = medianMs(3, () => standingsOf(state));
  console.log(`\n200,000 measurements, 40 measurands, 12 shared errors, 20 hypotheses, ${title}`);
  console.log(
    `  sums ${build.toFixed(0)} ms, all evidences ${point.toFixed(0)} ms, standings ${standings.toFixed(0)} ms`,
  );
}

furtherMeasurements("four shared errors", 0);
furtherMeasurements("and a zero point per night of 100", 100);
againstDense();
large("no batches", 0);
large("and a zero point for each of 1,000 nights", 200);
