import { readCampaign } from "@weighhouse/campaign/read";
import type { CampaignDocument } from "@weighhouse/campaign/document";

export interface Size {
  measurements: number;
  measurands: number;
  errors: number;
  hypotheses: number;
  /** Measurements of one batch; 0: no error is drawn per batch. */
  perBatch: number;
}

/** Numbers that look scattered and are the same every time (a Weyl sequence through a normal-like sum). */
function noise(i: number, salt: number): number {
  let sum = 0;
  for (let k = 1; k <= 4; k += 1) {
    const x = (i + 1) * (0.6180339887498949 * k + 0.137 * salt) + salt;
    sum += x - Math.floor(x) - 0.5;
  }
  return sum * Math.sqrt(3);
}

/** A campaign of any size, read. */
export function inventedCampaign(size: Size): CampaignDocument {
  const read = readCampaign(campaignForm(size));
  if (!read.ok) throw new Error(JSON.stringify(read.problems.slice(0, 3)));
  return read.value;
}

/** The same as it would stand in a file: every hypothesis speaks on three of four measurands. */
export function campaignForm(size: Size) {
  const batches = size.perBatch > 0;
  return {
    format: "weighhouse-campaign/1",
    campaign: { key: "bench", title: "Bench" },
    observables: [{ key: "o", title: "O", unit: "m", scale: "linear" }],
    measurands: Array.from({ length: size.measurands }, (_, m) => ({
      key: `m${m}`,
      observable: "o",
      scatter: 0.1,
      reference:
        m % 2 === 0
          ? { family: "uniform", lower: -20, upper: 20 }
          : { family: "normal", mean: 0, sd: 6, scatter: 0.2 },
    })),
    sharedErrors: [
      ...Array.from({ length: size.errors }, (_, e) => ({ key: `e${e}`, sd: 0.3 })),
      ...(batches ? [{ key: "zero-point", sd: 0.2, per: "batch" }] : []),
    ],
    hypotheses: Array.from({ length: size.hypotheses }, (_, h) => ({
      key: `h${h}`,
      title: `H${h}`,
      predictions: Array.from({ length: size.measurands }, (_, m) => ({
        measurand: `m${m}`,
        expected: noise(m, h),
        tolerance: { family: "normal", sd: 0.5, sharing: (h + m) % 5 === 0 ? "each" : "common" },
      })).filter((_, m) => (h + m) % 4 !== 0),
    })),
    measurements: measurementsOf(size, 0, size.measurements),
  };
}

/** Measurements `begin` to `end` of such a campaign, as they would stand in a file. */
export function measurementsOf(size: Size, begin: number, end: number) {
  return Array.from({ length: end - begin }, (_, k) => {
    const i = begin + k;
    const m = i % size.measurands;
    const error = Math.floor(i / size.measurands) % Math.max(size.errors, 1);
    return {
      id: `x${i}`,
      measurand: `m${m}`,
      value: noise(i, 2.3),
      sd: 0.4 + 0.1 * (i % 7),
      batch: size.perBatch > 0 ? `night-${Math.floor(i / size.perBatch)}` : null,
      shared: [
        ...(size.errors > 0 ? [{ error: `e${error}`, coefficient: 1 }] : []),
        ...(size.perBatch > 0 ? [{ error: "zero-point" }] : []),
      ],
    };
  });
}
