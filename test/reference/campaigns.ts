import { readCampaign } from "@weighhouse/campaign/read";
import { standingsSchema } from "@weighhouse/campaign/standings";
import type { Standings } from "@weighhouse/campaign/standings";
import { scoreCampaign } from "@weighhouse/engine/score";

/** Reads, scores and validates a campaign as the command line does. */
export function standingsFor(document: unknown): Standings {
  const read = readCampaign(document);
  if (!read.ok) throw new Error(JSON.stringify(read.problems));
  const scored = scoreCampaign(read.value);
  if (!scored.ok) throw new Error(JSON.stringify(scored.problems));
  return standingsSchema.parse(scored.value);
}

export interface OneMeasurand {
  reference: Record<string, unknown>;
  predictions?: Record<string, Record<string, unknown>>;
  data: { value: number; sd: number }[];
  weight?: number;
}

/** A campaign on one linear measurand `x`; predictions by hypothesis. */
export function oneMeasurand({ reference, predictions = {}, data, weight = 0 }: OneMeasurand) {
  return standingsFor({
    format: "weighhouse-campaign/1",
    campaign: { key: "one", title: "One measurand", noneOfThese: { weight } },
    observables: [{ key: "o", title: "O", unit: "m", scale: "linear" }],
    measurands: [{ key: "x", observable: "o", reference }],
    hypotheses: Object.entries(predictions).map(([key, prediction]) => ({
      key,
      title: key,
      predictions: [{ measurand: "x", ...prediction }],
    })),
    measurements: data.map((one, i) => ({ id: `d${i}`, measurand: "x", ...one })),
  });
}
