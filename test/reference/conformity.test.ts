import { describe, expect, test } from "vitest";
import { readCampaign } from "@weighhouse/campaign/read";
import { previewPrediction } from "@weighhouse/engine/prediction-preview";
import { oneMeasurand, standingsFor } from "./campaigns";
import { record, relative } from "./records";

const reference = { family: "uniform", lower: -2000, upper: 2000 };

describe("JCGM 106:2012, one-sided tolerances", () => {
  test("conformance is Phi of the distance in u (7.3: the Zener voltage, the burst pressure)", () => {
    const { expected } =
      record<{ case: string; pc: number; printed: number }[]>("jcgm106.pc_one_sided");
    const cases = [
      { family: "atMost", bound: -5.4, value: -5.47, sd: 0.05 },
      { family: "atLeast", bound: 490, value: 509.7, sd: 8.6 },
    ];
    cases.forEach(({ family, bound, value, sd }, i) => {
      const { verdicts } = oneMeasurand({
        reference,
        predictions: { within: { tolerance: { family, bound } } },
        data: [{ value, sd }],
      });
      const { pc, printed } = expected[i]!;
      expect(relative(verdicts[0]!.conformance!, pc)).toBeLessThan(1e-11);
      expect(Number(verdicts[0]!.conformance!.toFixed(2))).toBe(printed);
    });
  });

  test("at a guard band of r U the conformance is Phi(2 r) (8.3.2)", () => {
    const { expected } =
      record<{ w_over_U: number; pc_at_acceptance_limit_one_sided: number }[]>(
        "jcgm106.guard_band",
      );
    for (const { w_over_U: r, pc_at_acceptance_limit_one_sided: pc } of expected) {
      const { verdicts } = oneMeasurand({
        reference,
        predictions: { within: { tolerance: { family: "atMost", bound: 10 } } },
        // U = 2 u with u = 0.5.
        data: [{ value: 10 - r, sd: 0.5 }],
      });
      expect(relative(verdicts[0]!.conformance!, pc)).toBeLessThan(1e-9);
      expect(verdicts[0]!.verdict === "pass").toBe(pc >= 0.95);
    }
  });
});

test("values that pass are JCGM 106's acceptance interval: its risks for the resistors (9.5)", () => {
  const { inputs, expected } = record<
    { w_ohm: number; RC: number; RP: number; prior_conforming: number; accept: number }[],
    { T: [number, number]; y0: number; u0: number; um: number }
  >("jcgm106.resistors");
  const [lower, upper] = inputs.T;
  const phi = (z: number) => Math.exp((-z * z) / 2) / Math.sqrt(2 * Math.PI);
  // Guard bands of u and 2 u: accepted where Phi(w / u), the other limit being far, is reached.
  for (const [w, pass] of [
    [0.04, 0.8413447460685429],
    [0.08, 0.9772498680518208],
  ] as const) {
    const read = readCampaign({
      format: "weighhouse-campaign/1",
      campaign: { key: "resistors", title: "Resistors", rule: { pass, fail: 0.01 } },
      observables: [{ key: "o", title: "O", unit: "ohm", scale: "linear" }],
      measurands: [{ key: "x", observable: "o", reference }],
      hypotheses: [],
      measurements: [],
    });
    if (!read.ok) throw new Error(JSON.stringify(read.problems));
    const tolerance = { family: "interval", lower, upper, sharing: "common" } as const;
    const preview = previewPrediction(
      read.value,
      { measurand: "x", expected: null, tolerance },
      { sd: inputs.um },
    );
    if (!preview.ok) throw new Error(JSON.stringify(preview.problems));
    const [from, to] = [preview.value.passes!.lower!, preview.value.passes!.upper!];
    expect(from).toBeCloseTo(lower + w, 6);
    let [rc, rp] = [0, 0];
    const step = 1e-4;
    for (let truth = inputs.y0 - 1; truth < inputs.y0 + 1; truth += step) {
      const mass = (phi((truth - inputs.y0) / inputs.u0) / inputs.u0) * step;
      let accepted = 0;
      const inner = (to - from) / 400;
      for (let k = 0; k < 400; k += 1) {
        const reading = from + (k + 0.5) * inner;
        accepted += (phi((reading - truth) / inputs.um) / inputs.um) * inner;
      }
      if (truth < lower || truth > upper) rc += mass * accepted;
      else rp += mass * (1 - accepted);
    }
    const row = expected.find(({ w_ohm }) => w_ohm === w)!;
    // A plain sum of 20000 by 400 steps.
    expect(relative(rc, row.RC)).toBeLessThan(1e-2);
    expect(relative(rp, row.RP)).toBeLessThan(1e-2);
  }
});

describe("Barlow's linear variance (arXiv:physics/0406120)", () => {
  interface Combined {
    value: number;
    plus: number;
    minus: number;
    chi2: number;
  }
  const combine = (data: { value: number; plus: number; minus: number }[]) => {
    const { measurands } = oneMeasurand({
      reference,
      data: data as unknown as { value: number; sd: number }[],
    });
    return measurands[0]!.combined!;
  };

  test.each(["asym.combine.symmetric", "asym.combine.two_mirror"])("%s", (id) => {
    const { inputs, expected } = record<
      { linear_variance: Combined },
      { measurements: { value: number; plus: number; minus: number }[] }
    >(id);
    const { value, sd, chiSquare } = combine(inputs.measurements);
    const { linear_variance: linear } = expected;
    expect(relative(value, linear.value)).toBeLessThan(1e-9);
    expect(relative(sd, (linear.plus + linear.minus) / 2)).toBeLessThan(1e-8);
    expect(Math.abs(chiSquare! - linear.chi2)).toBeLessThan(1e-8);
  });

  test("pairs of counts that add up to ten, each with its own two sides", () => {
    const sides = record<{ n: number; plus: number; minus: number }[]>("asym.poisson_delta_lnL");
    const { expected } =
      record<{ counts: [number, number]; linear_variance: Combined }[]>("asym.poisson_pairs");
    for (const { counts, linear_variance: linear } of expected) {
      const data = counts.map((n) => {
        const { plus, minus } = sides.expected.find((one) => one.n === n)!;
        return { value: n, plus, minus };
      });
      const clamped = (mu: number) =>
        data.some((one) => mu - one.value > one.plus || one.value - mu > one.minus);
      const { value, sd, chiSquare } = combine(data);
      // The record's variance isn't kept within the squares of the two sides, the engine's is: they
      // are the same where no value is further off than its side.
      if (clamped(linear.value)) continue;
      expect(relative(value, linear.value)).toBeLessThan(1e-8);
      expect(Math.abs(chiSquare! - linear.chi2)).toBeLessThan(1e-7);
      if (clamped(linear.value + linear.plus) || clamped(linear.value - linear.minus)) continue;
      expect(relative(sd, (linear.plus + linear.minus) / 2)).toBeLessThan(1e-8);
    }
    expect(expected).toHaveLength(5);
  });
});

test("under a flat reference a count's 90 and 95 % upper limits are the classical ones", () => {
  const { expected } = record<{ n: number; up90: number; up95: number }[]>(
    "limit.poisson_zero_background",
  );
  for (const { n, up90, up95 } of expected) {
    const { measurands } = standingsFor({
      format: "weighhouse-campaign/1",
      campaign: { key: "counts", title: "Counts" },
      observables: [{ key: "o", title: "O", unit: "1", scale: "count" }],
      measurands: [
        {
          key: "x",
          observable: "o",
          reference: { family: "uniform", lower: 0, upper: 200 },
          thresholds: [
            { key: "up90", value: up90 },
            { key: "up95", value: up95 },
          ],
        },
      ],
      hypotheses: [],
      measurements: [{ id: "n", measurand: "x", count: n }],
    });
    const [above90, above95] = measurands[0]!.thresholds.map(
      ({ probabilityAbove }) => probabilityAbove!,
    );
    expect(above90).toBeCloseTo(0.1, 9);
    expect(above95).toBeCloseTo(0.05, 9);
  }
});

test("detections and upper limits against an exact value: their joint likelihood", () => {
  const { expected } = record<
    { mu: number; sigma: number; detections: number[]; upper_limits: number[]; ln_L: number }[]
  >("censored.normal_upper_limits");
  for (const { mu, sigma, detections, upper_limits, ln_L } of expected) {
    const { hypotheses } = standingsFor({
      format: "weighhouse-campaign/1",
      campaign: { key: "censored", title: "Censored" },
      observables: [{ key: "o", title: "O", unit: "m", scale: "linear" }],
      measurands: [{ key: "x", observable: "o", reference }],
      hypotheses: [{ key: "h", title: "H", predictions: [{ measurand: "x", expected: mu }] }],
      measurements: [
        ...detections.map((value, i) => ({ id: `d${i}`, measurand: "x", value, sd: sigma })),
        ...upper_limits.map((value, i) => ({
          id: `u${i}`,
          measurand: "x",
          limit: "upper",
          value,
          sd: sigma,
        })),
      ],
    });
    expect(relative(hypotheses[0]!.lnEvidence!, ln_L)).toBeLessThan(1e-11);
  }
});

test("a calibration line (GUM H.3): parameters with vague priors are its least squares", () => {
  const { inputs, expected } = record<
    { y1: number; u_y1: number; y2: number; u_y2: number; s: number },
    { t: number[]; b: number[]; t0: number }
  >("gum.H3");
  const { hypotheses } = standingsFor({
    format: "weighhouse-campaign/1",
    campaign: { key: "thermometer", title: "Thermometer" },
    observables: [
      {
        key: "o",
        title: "O",
        unit: "K",
        scale: "linear",
        conditions: [{ key: "t", unit: "degC" }],
      },
    ],
    measurands: [
      {
        key: "x",
        observable: "o",
        shape: "curve",
        where: { t: [20, 30] },
        reference: { family: "polynomial", in: "t", degree: 1, centre: 0, sd: 1 },
      },
    ],
    hypotheses: [
      {
        key: "h",
        title: "H",
        parameters: ["y1", "y2"].map((key) => ({
          key,
          prior: { family: "normal", mean: 0, sd: 1e4 },
        })),
        predictions: [{ measurand: "x", expected: `y1 + y2 * (t - ${inputs.t0})` }],
      },
    ],
    measurements: inputs.t.map((t, i) => ({
      id: `m${i}`,
      measurand: "x",
      conditions: { t },
      value: inputs.b[i],
      sd: expected.s,
    })),
  });
  const [y1, y2] = hypotheses[0]!.parameters;
  expect(relative(y1!.mean, expected.y1)).toBeLessThan(1e-9);
  expect(relative(y1!.sd, expected.u_y1)).toBeLessThan(1e-9);
  expect(relative(y2!.mean, expected.y2)).toBeLessThan(1e-9);
  expect(relative(y2!.sd, expected.u_y2)).toBeLessThan(1e-9);
  // s is the root of the least squares over 11 - 2.
  expect(hypotheses[0]!.chiSquare).toBeCloseTo(9, 6);
});
