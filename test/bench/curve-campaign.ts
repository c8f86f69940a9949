import type { CampaignDocument, Measurement } from "@weighhouse/campaign/document";
import { readCampaign } from "@weighhouse/campaign/read";

/** One curve of `count` measurements: a polynomial reference, a line expected, a smooth tolerance. */
export function curveCampaign(count: number, smooth = false): CampaignDocument {
  const read = readCampaign({
    format: "weighhouse-campaign/1",
    campaign: { key: "bench-curve", title: "Bench" },
    observables: [
      { key: "o", title: "O", unit: "m", scale: "linear", conditions: [{ key: "x", unit: "s" }] },
    ],
    measurands: [
      {
        key: "m",
        observable: "o",
        shape: "curve",
        where: { x: [0, 1] },
        reference: { family: "polynomial", in: "x", degree: 3, centre: 0, sd: 3 },
      },
    ],
    sharedErrors: [{ key: "zero", sd: 0.2 }],
    hypotheses: [
      {
        key: "line",
        title: "Line",
        parameters: [
          { key: "a", prior: { family: "normal", mean: 0, sd: 1 } },
          { key: "b", prior: { family: "normal", mean: 1, sd: 1 } },
        ],
        predictions: [
          {
            measurand: "m",
            expected: "a + b * x",
            ...(smooth
              ? {
                  tolerance: {
                    family: "normal",
                    sd: 0.1,
                    sharing: "smooth",
                    in: "x",
                    length: 0.1,
                  },
                }
              : {}),
          },
        ],
      },
    ],
    measurements: Array.from({ length: count }, (_, i) => measurement(i)),
  });
  if (!read.ok) throw new Error(JSON.stringify(read.problems.slice(0, 3)));
  return read.value;
}

/** Measurements [begin, end) of it, as read. */
export function curveMeasurements(begin: number, end: number): Measurement[] {
  const template = curveCampaign(1).measurements[0]!;
  return Array.from({ length: end - begin }, (_, i) => {
    const { id, conditions, value } = measurement(begin + i);
    return { ...template, id, conditions, value };
  });
}

function measurement(i: number) {
  const x = (i * 0.6180339887498949) % 1;
  return {
    id: `x${i}`,
    measurand: "m",
    conditions: { x },
    value: 0.9 * x + 0.1 * Math.sin(i),
    sd: 0.1,
    shared: [{ error: "zero" }],
  };
}
