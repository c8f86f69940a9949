import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { Standings } from "@weighhouse/campaign/standings";
import { documentFrom, standingsFrom } from "./documents";

interface Parts {
  scale?: string;
  observable?: Record<string, unknown>;
  measurand?: Record<string, unknown>;
  /** Of the one hypothesis `h`, beside its prediction. */
  hypothesis?: Record<string, unknown>;
  /** What it says of `x`; null: nothing. */
  prediction: Record<string, unknown> | null;
  measurements: Record<string, unknown>[];
  document?: Record<string, unknown>;
}

/** A campaign of one measurand `x`, with a wide uniform reference unless told, and one hypothesis. */
export function oneMeasurand(parts: Parts): CampaignDocument {
  const { scale = "linear", prediction, measurements } = parts;
  return documentFrom({
    observables: [{ key: "o", title: "O", scale, unit: "m", ...parts.observable }],
    measurands: [
      {
        key: "x",
        observable: "o",
        reference: { family: "uniform", lower: 1, upper: 100 },
        ...parts.measurand,
      },
    ],
    hypotheses: [
      {
        key: "h",
        title: "H",
        predictions: prediction === null ? [] : [{ measurand: "x", ...prediction }],
        ...parts.hypothesis,
      },
    ],
    measurements: measurements.map((one, i) => ({ id: `m${i}`, measurand: "x", ...one })),
    ...parts.document,
  });
}

/** The standings of the hypothesis, and the whole. */
export function scored(parts: Parts): Standings["hypotheses"][number] & { standings: Standings } {
  const standings = standingsFrom(oneMeasurand(parts));
  return { ...standings.hypotheses.find(({ key }) => key === "h")!, standings };
}
