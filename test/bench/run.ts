import type { CampaignDocument } from "@weighhouse/campaign/document";
import { evidencesOf } from "@weighhouse/engine/evidences";
import { createState, standingsOf, type EngineState } from "@weighhouse/engine/state";
import { inventedCampaign, type Size } from "./invented-campaign";
import { plainDenseEvidence } from "./plain-dense";
import { medianMs } from "./timing";

/**
 * Scoring against a plain dense computation, and what a large campaign takes inside the engine. Run
 * by `npm run bench`.
 */
function stateOf(document: CampaignDocument): EngineState {
  const state = createState(document);
  if (!state.ok) throw new Error(JSON.stringify(state.problems.slice(0, 3)));
  return state.value;
}

const shape = { measurands: 10, errors: 4, hypotheses: 5 };

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

againstDense();
large("no batches", 0);
large("and a zero point for each of 1,000 nights", 200);
