import { readCandidatesText } from "@weighhouse/campaign/candidates";
import type { CampaignDocument } from "@weighhouse/campaign/document";
import { planSchema, type Plan } from "@weighhouse/campaign/plan";
import { problemLine } from "@weighhouse/campaign/problem";
import { readCampaign } from "@weighhouse/campaign/read";
import { describe, expect, test } from "vitest";
import { informationGain } from "./information-gain";
import { planOf } from "./plan";

function campaign(parts: Record<string, unknown>): CampaignDocument {
  const read = readCampaign({
    format: "weighhouse-campaign/1",
    campaign: { key: "spring-tide", title: "Spring tide" },
    observables: [
      { key: "level", title: "Level", unit: "m", scale: "linear" },
      { key: "flow", title: "Flow", unit: "kg/s", scale: "log10" },
      { key: "surge", title: "Surge", scale: "event" },
      { key: "seals", title: "Seals", unit: "1", scale: "count" },
    ],
    measurands: [
      { key: "may", observable: "level", reference: { family: "uniform", lower: -50, upper: 50 } },
      { key: "june", observable: "level", reference: { family: "normal", mean: 0, sd: 9 } },
      {
        key: "flow-may",
        observable: "flow",
        reference: { family: "uniform", lower: 1, upper: 1e4 },
      },
      { key: "surge-may", observable: "surge" },
      { key: "seals-may", observable: "seals", reference: { family: "gamma", mean: 4, sd: 3 } },
    ],
    sharedErrors: [{ key: "zero", sd: 0.4 }],
    hypotheses: [],
    measurements: [],
    ...parts,
  });
  if (!read.ok) throw new Error(read.problems.map(problemLine).join("\n"));
  return read.value;
}

function planned(document: CampaignDocument, candidates: object[]): Plan {
  const text = JSON.stringify({ format: "weighhouse-candidates/1", candidates });
  const read = readCandidatesText(text, document);
  if (!read.ok) throw new Error(read.problems.map(problemLine).join("\n"));
  const plan = planOf(document, read.value);
  if (!plan.ok) throw new Error(plan.problems.map(problemLine).join("\n"));
  expect(planSchema.parse(plan.value)).toEqual(plan.value);
  return plan.value;
}

const twoLevels = {
  hypotheses: [
    {
      key: "high",
      title: "High",
      predictions: [
        { measurand: "may", expected: 2, tolerance: { family: "normal", sd: 0.5 } },
        { measurand: "june", expected: 2 },
      ],
    },
    { key: "low", title: "Low", predictions: [{ measurand: "may", expected: 1 }] },
  ],
};

describe("predictives and gains agree with closed forms of normal distributions", () => {
  const document = campaign({
    ...twoLevels,
    measurements: [
      { id: "m1", measurand: "may", value: 1.6, sd: 0.5, shared: [{ error: "zero" }] },
    ],
  });
  const plan = planned(document, [
    { key: "again", measurand: "may", sd: 0.3, shared: [{ error: "zero" }], cost: 2, chance: 0.5 },
  ]);
  const [row] = plan.candidates;
  const of = (hypothesis: string) => row!.predictive.find((one) => one.hypothesis === hypothesis)!;

  test("given a first reading through a theory error and a shared error", () => {
    // Joint normal of both readings: variance v + u^2 + s^2 each, covariance v + u^2.
    for (const [key, expected, v] of [
      ["high", 2, 0.25],
      ["low", 1, 0],
    ] as const) {
      const shared = v + 0.16;
      const mean = expected + (shared / (shared + 0.25)) * (1.6 - expected);
      const variance = shared - shared ** 2 / (shared + 0.25);
      expect(Math.abs(of(key).mean! - mean)).toBeLessThan(1e-9);
      expect(Math.abs(of(key).sd! - Math.sqrt(variance))).toBeLessThan(1e-9);
    }
  });

  test("the gain is times the chance, and per cost", () => {
    const predictive = (key: string) => {
      const { mean, sd } = of(key);
      const components = [{ weight: 1, mean: mean!, variance: sd! ** 2 }];
      return { components, floor: 0, mean: mean!, sd: sd! };
    };
    // Posteriors of the two with today's reading alone, by hand: N(1.6; 2, 0.66) and N(1.6; 1, 0.41).
    const density = (expected: number, variance: number) =>
      Math.exp(-((1.6 - expected) ** 2) / (2 * variance)) / Math.sqrt(variance);
    const [high, low] = [density(2, 0.66), density(1, 0.41)];
    const gain = informationGain(
      [
        { posterior: high / (high + low), predictive: predictive("high") },
        { posterior: low / (high + low), predictive: predictive("low") },
      ],
      0.3,
    );
    expect(Math.abs(row!.informationGainBits - gain / 2)).toBeLessThan(1e-9);
    expect(row!.gainPerCost).toBe(row!.informationGainBits / 2);
  });
});

test("a set of two readings of one theory error tells what their mean would", () => {
  const document = campaign(twoLevels);
  const pair = planned(document, [
    { key: "a", measurand: "may", sd: 0.6 },
    { key: "b", measurand: "may", sd: 0.6 },
  ]);
  const mean = planned(document, [{ key: "mean", measurand: "may", sd: 0.6 / Math.SQRT2 }]);
  expect(pair.sets[0]!.candidates).toEqual(["a", "b"]);
  const difference = pair.sets[0]!.informationGainBits - mean.candidates[0]!.informationGainBits;
  expect(Math.abs(difference)).toBeLessThan(2e-3);
});

test("a candidate that no two hypotheses tell apart earns nothing, however small its sd", () => {
  const hypotheses = ["one", "other"].map((key) => ({
    key,
    title: key,
    predictions: [{ measurand: "may", expected: 3 }],
  }));
  const [row] = planned(campaign({ hypotheses }), [
    { key: "a", measurand: "may", sd: 0.1 },
  ]).candidates;
  expect(row!.informationGainBits).toBeLessThan(1e-12);
  expect(row!.halfGainSd).toBeNull();
});

test("flat predictives are tabulated: an interval and a reference, on a log10 scale too", () => {
  const document = campaign({
    hypotheses: [
      {
        key: "band",
        title: "Band",
        predictions: [
          { measurand: "flow-may", tolerance: { family: "interval", lower: 10, upper: 1000 } },
        ],
      },
      { key: "silent", title: "Silent", predictions: [] },
    ],
  });
  const [row] = planned(document, [{ key: "a", measurand: "flow-may", sd: 0.01 }]).candidates;
  // A reading inside the band is twice as probable under it, outside impossible; but for what the
  // edges blur (0.01 of 2 dex each), I = 1/2 log2(4/3) + 1/2 (1/2 log2(2/3) + 1/2 log2(2)).
  const bits = 0.5 * Math.log2(4 / 3) + 0.5 * (0.5 * Math.log2(2 / 3) + 0.5 * Math.log2(2));
  expect(Math.abs(row!.informationGainBits - bits)).toBeLessThan(6e-3);
  const [band, silent] = row!.predictive;
  // Uniform over 2 and over 4 dex about 2: sd = width / sqrt 12.
  expect(Math.abs(band!.mean! - 2)).toBeLessThan(1e-3);
  expect(Math.abs(band!.sd! / (2 / Math.sqrt(12)) - 1)).toBeLessThan(2e-3);
  expect(Math.abs(silent!.sd! / (4 / Math.sqrt(12)) - 1)).toBeLessThan(2e-3);
});

test("an event's report and a count are summed over their outcomes", () => {
  const document = campaign({
    hypotheses: [
      {
        key: "wild",
        title: "Wild",
        predictions: [
          { measurand: "surge-may", probability: 0.9 },
          { measurand: "seals-may", expected: 6 },
        ],
      },
      {
        key: "calm",
        title: "Calm",
        predictions: [
          { measurand: "surge-may", probability: 0.2 },
          { measurand: "seals-may", expected: 2 },
        ],
      },
    ],
  });
  const { candidates } = planned(document, [
    { key: "watch", measurand: "surge-may", efficiency: 0.8, falseAlarm: 0.1 },
    { key: "count", measurand: "seals-may", exposure: 1.5, background: 0.5 },
  ]);
  const watch = candidates.find(({ key }) => key === "watch")!;
  const entropy = (p: number) => -p * Math.log2(p) - (1 - p) * Math.log2(1 - p);
  const report = (p: number) => 0.8 * p + 0.1 * (1 - p);
  const [wild, calm] = [report(0.9), report(0.2)];
  const bits = entropy((wild + calm) / 2) - (entropy(wild) + entropy(calm)) / 2;
  expect(Math.abs(watch.informationGainBits - bits)).toBeLessThan(1e-12);
  expect(watch.predictive.map(({ mean }) => mean!.toFixed(12))).toEqual(
    watch.predictive.map(({ hypothesis }) => (hypothesis === "wild" ? 0.9 : 0.2).toFixed(12)),
  );
  const count = candidates.find(({ key }) => key === "count")!;
  // Poisson of 9.5 and 3.5 counts.
  let counted = 0;
  let [a, b] = [Math.exp(-9.5), Math.exp(-3.5)];
  for (let n = 1; n <= 80; n += 1) {
    const mixed = (a + b) / 2;
    counted += (a * Math.log2(a / mixed) + b * Math.log2(b / mixed)) / 2;
    a *= 9.5 / n;
    b *= 3.5 / n;
  }
  expect(Math.abs(count.informationGainBits - counted)).toBeLessThan(1e-9);
  for (const { hypothesis, mean, sd } of count.predictive) {
    expect(Math.abs(mean! - (hypothesis === "wild" ? 6 : 2))).toBeLessThan(1e-9);
    expect(sd!).toBeLessThan(1e-4);
  }
});

test("candidates that don't fit their campaign are refused, all at once, each at its place", () => {
  const text = JSON.stringify({
    format: "weighhouse-candidates/1",
    candidates: [
      { key: "a", measurand: "nowhere", sd: 1 },
      { key: "a", measurand: "may" },
      { key: "c", measurand: "surge-may", sd: 1 },
      { key: "d", measurand: "june", sd: 1, shared: [{ error: "unknown" }] },
    ],
  });
  const read = readCandidatesText(text, campaign({}));
  expect(read.ok ? [] : read.problems.map(({ pointer }) => pointer)).toEqual([
    "/candidates/0/measurand",
    "/candidates/1/key",
    "/candidates/1/sd",
    "/candidates/2/sd",
    "/candidates/3/shared/0/error",
  ]);
});
