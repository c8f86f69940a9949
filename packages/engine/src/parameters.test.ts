import { describe, expect, test } from "vitest";
import { covarianceOf, lnDensity, lnIntegral, lnNormal, lnPieces } from "./testing/brute-force";
import { scored } from "./testing/one-measurand";

// Parameters, ensembles, counts and events against closed forms or brute-force integrals (testing/).
const near = (value: number | null, expected: number, error = 1e-9) =>
  expect(Math.abs(value! - expected)).toBeLessThan(error * Math.max(1, Math.abs(expected)));

const readings = [
  { value: 9, sd: 1 },
  { value: 11, sd: 2 },
];
const lnL = (mu: number) => lnDensity(9 - mu, 1) + lnDensity(11 - mu, 2);
const withPrior = (prior: Record<string, unknown>, expected = "q") =>
  scored({
    hypothesis: { parameters: [{ key: "q", prior }] },
    prediction: { expected },
    measurements: readings,
  });

describe("a parameter", () => {
  test("of a normal prior that enters linearly is a tolerance by another name", () => {
    const { lnEvidence, chiSquare, degreesOfFreedom, parameters } = withPrior({
      family: "normal",
      mean: 12,
      sd: 3,
    });
    const tolerance = scored({
      prediction: { expected: 12, tolerance: { family: "normal", sd: 3 } },
      measurements: readings,
    });
    near(lnEvidence, tolerance.lnEvidence!, 1e-12);
    near(chiSquare, tolerance.chiSquare!, 1e-12);
    expect(degreesOfFreedom).toBe(2);
    // Precision-weighted mean of 12 +- 3, 9 +- 1, 11 +- 2.
    const weight = 1 / 9 + 1 + 1 / 4;
    const mean = (12 / 9 + 9 + 11 / 4) / weight;
    const sd = 1 / Math.sqrt(weight);
    near(parameters[0]!.mean, mean);
    near(parameters[0]!.sd, sd);
    // Phi(1.959963984540054) = 0.975 (normal table).
    const reach = 1.959963984540054 * sd;
    parameters[0]!.quantiles.forEach((value, i) => near(value, mean + (i - 1) * reach));
  });

  test("of a uniform prior is an interval by another name, and costs a degree of freedom", () => {
    const { lnEvidence, chiSquare, degreesOfFreedom, parameters } = withPrior({
      family: "uniform",
      lower: 5,
      upper: 12,
    });
    near(lnEvidence, lnIntegral(lnL, 5, 12) - Math.log(7));
    const below = (q: number) => Math.exp(lnIntegral(lnL, 5, q) - lnIntegral(lnL, 5, 12));
    parameters[0]!.quantiles.forEach((q, i) => near(below(q), [0.025, 0.5, 0.975][i]!));
    near(chiSquare, 4 / 5);
    expect(degreesOfFreedom).toBe(1);
  });

  test("of any prior is integrated over it", () => {
    const lognormal = withPrior({ family: "lognormal", median: 8, sdLog10: 0.1 });
    const inZ = (z: number) => lnL(8 * 10 ** (0.1 * z)) + lnDensity(z);
    near(lognormal.lnEvidence, lnIntegral(inZ, -9, 9));
    const loguniform = withPrior({ family: "loguniform", lower: 2, upper: 50 });
    const inLog = (t: number) => lnL(Math.exp(t)) - Math.log(Math.log(25));
    near(loguniform.lnEvidence, lnIntegral(inLog, Math.log(2), Math.log(50)));
    const halfnormal = withPrior({ family: "halfnormal", sd: 6 });
    near(halfnormal.lnEvidence, lnIntegral((z) => lnL(6 * z) + lnDensity(z), 0, 9) + Math.LN2);
    near(withPrior({ family: "fixed", value: 10 }).lnEvidence, lnL(10), 1e-12);
  });

  test("that enters by its square is integrated numerically, and its posterior told", () => {
    const prior = { family: "normal", mean: 3, sd: 0.5 };
    const { lnEvidence, parameters } = withPrior(prior, "q^2");
    const joint = (z: number) => lnL((3 + z / 2) ** 2) + lnDensity(z);
    const whole = lnIntegral(joint, -9, 9);
    near(lnEvidence, whole);
    const moment = (f: (q: number) => number) => {
      const positive = (z: number) => joint(z) + Math.log(f(3 + z / 2));
      return Math.exp(lnIntegral(positive, -9, 9) - whole);
    };
    const mean = moment((q) => q + 20) - 20;
    near(parameters[0]!.mean, mean, 1e-6);
    near(parameters[0]!.sd, Math.sqrt(moment((q) => (q - mean) ** 2)), 1e-6);
    const below = (q: number) => Math.exp(lnIntegral(joint, -9, 2 * (q - 3)) - whole);
    parameters[0]!.quantiles.forEach((q, i) => near(below(q), [0.025, 0.5, 0.975][i]!, 1e-5));
  });

  test("that no measurement hangs on has its prior as posterior, a fixed one has no width", () => {
    const { parameters } = scored({
      hypothesis: {
        parameters: [
          { key: "q", prior: { family: "uniform", lower: 0, upper: 1 } },
          { key: "f", prior: { family: "fixed", value: 10 } },
        ],
      },
      prediction: { expected: "f" },
      measurements: readings,
    });
    expect(parameters).toEqual([
      { key: "q", mean: 0.5, sd: 1 / Math.sqrt(12), quantiles: [0.025, 0.5, 0.975] },
      { key: "f", mean: 10, sd: 0, quantiles: [10, 10, 10] },
    ]);
  });

  test("in two predictions ties their measurands together", () => {
    const { lnEvidence, standings } = scored({
      hypothesis: {
        parameters: [
          { key: "a", prior: { family: "normal", mean: 10, sd: 3 } },
          { key: "b", prior: { family: "normal", mean: 1, sd: 0.2 } },
        ],
        predictions: [
          { measurand: "x", expected: "a + 2 * b" },
          { measurand: "y", expected: "a - b" },
        ],
      },
      prediction: null,
      measurements: [...readings, { measurand: "y", value: 7, sd: 0.5 }],
      document: {
        measurands: ["x", "y"].map((key) => ({
          key,
          observable: "o",
          reference: { family: "uniform", lower: 1, upper: 100 },
        })),
      },
    });
    const covariance = covarianceOf([1, 2, 0.5], [3, 3, 3], [0.4, 0.4, -0.2]);
    near(lnEvidence, lnNormal([9, 11, 7], [12, 12, 9], covariance));
    expect(standings.hypotheses[0]!.parameters.map(({ key }) => key)).toEqual(["a", "b"]);
  });

  test("without a value somewhere has a likelihood of zero there", () => {
    const { lnEvidence } = withPrior({ family: "normal", mean: 1, sd: 1 }, "9 + sqrt(q)");
    const joint = (t: number) => lnL(9 + t) + Math.log(2 * t) + lnDensity(t * t - 1);
    near(lnEvidence, lnIntegral(joint, 0, 3.2));
  });

  test("is looked up in a table", () => {
    const { lnEvidence } = scored({
      hypothesis: {
        parameters: [{ key: "q", prior: { family: "uniform", lower: 0, upper: 3 } }],
        tables: [{ key: "grid", in: ["q"], at: [[0, 1, 2]], values: [5, 9, 10] }],
      },
      prediction: { expected: "table(grid, q)" },
      measurements: readings,
    });
    // Above 2 the table has no value.
    const joint = (q: number) => lnL(q < 1 ? 5 + 4 * q : 8 + q);
    near(lnEvidence, lnPieces(joint, [0, 1, 2]) - Math.log(3));
  });
});

describe("an ensemble", () => {
  test("is the weighted sum over its rows, one row for all measurands", () => {
    const { lnEvidence, chiSquare } = scored({
      hypothesis: {
        ensemble: { columns: { u: [8, 10, 12], v: [1, 2, 4] }, weights: [1, 2, 1] },
        predictions: [
          { measurand: "x", expected: "u" },
          { measurand: "y", expected: "v" },
        ],
      },
      prediction: null,
      measurements: [...readings, { measurand: "y", value: 2.5, sd: 0.5 }],
      document: {
        measurands: ["x", "y"].map((key) => ({
          key,
          observable: "o",
          reference: { family: "uniform", lower: 1, upper: 100 },
        })),
      },
    });
    const rows = [
      [8, 1, 0.25],
      [10, 2, 0.5],
      [12, 4, 0.25],
    ] as const;
    const z = rows.map(([u, v, w]) => w * Math.exp(lnL(u) + lnDensity(2.5 - v, 0.5)));
    near(lnEvidence, Math.log(z[0]! + z[1]! + z[2]!));
    // The best row: (9 - 10)^2 + (11 - 10)^2 / 4 + (2.5 - 2)^2 / 0.25.
    near(chiSquare, 1 + 0.25 + 1);
  });
});

const lnFactorial = (n: number) => {
  let ln = 0;
  for (let k = 2; k <= n; k += 1) ln += Math.log(k);
  return ln;
};
const lnPoisson = (n: number, mean: number) => n * Math.log(mean) - mean - lnFactorial(n);

describe("counts", () => {
  const counts = {
    scale: "count",
    observable: { unit: "1" },
    measurand: { reference: { family: "uniform", lower: 0, upper: 30 } },
    measurements: [
      { count: 6, exposure: 2, background: 0.5 },
      { count: 1, exposure: 0.5 },
    ],
  };
  const lnL2 = (rate: number) => lnPoisson(6, 2 * rate + 0.5) + lnPoisson(1, 0.5 * rate);

  test("are Poisson about exposure x rate + background", () => {
    const { lnEvidence, standings, chiSquare } = scored({ ...counts, prediction: { expected: 3 } });
    near(lnEvidence, lnL2(3), 1e-12);
    near(standings.noModel.lnEvidence, lnIntegral(lnL2, 0, 30) - Math.log(30));
    expect(chiSquare).toBeNull();
  });

  test("with a gamma tolerance are integrated over it", () => {
    const { lnEvidence } = scored({
      ...counts,
      prediction: { tolerance: { family: "gamma", mean: 4, sd: 2 } },
    });
    // Shape (4/2)^2 = 4, scale 2^2/4 = 1: density r^3 e^-r / 3!.
    const joint = (rate: number) => lnL2(rate) + 3 * Math.log(rate) - rate - Math.log(6);
    near(lnEvidence, lnIntegral(joint, 0, 60));
  });

  test("whose rate hangs on a parameter are integrated with it", () => {
    const { lnEvidence, parameters } = scored({
      ...counts,
      hypothesis: { parameters: [{ key: "q", prior: { family: "uniform", lower: 1, upper: 2 } }] },
      prediction: { expected: "q^2" },
    });
    near(
      lnEvidence,
      lnIntegral((q) => lnL2(q * q), 1, 2),
    );
    expect(parameters[0]!.mean).toBeGreaterThan(1.5);
  });
});

describe("events", () => {
  const event = {
    scale: "event",
    observable: { unit: null },
    measurand: { reference: null },
    measurements: [
      { occurred: true, efficiency: 0.9, falseAlarm: 0.02 },
      { occurred: false, efficiency: 0.6, falseAlarm: 0.1 },
    ],
  };

  test("have one truth", () => {
    const { lnEvidence, standings, chiSquare } = scored({
      ...event,
      prediction: { probability: 0.7 },
    });
    near(lnEvidence, Math.log(0.7 * 0.9 * 0.4 + 0.3 * 0.02 * 0.9), 1e-12);
    near(standings.noModel.lnEvidence, Math.log((0.9 * 0.4 + 0.02 * 0.9) / 2), 1e-12);
    expect(chiSquare).toBeNull();
  });

  test("open and close what is said on condition of them", () => {
    const given = (occurred: boolean) =>
      scored({
        prediction: { expected: 10, given: { measurand: "e", occurred } },
        measurements: [
          ...readings,
          { measurand: "e", occurred: true, efficiency: 0.9, falseAlarm: 0.01 },
        ],
        document: {
          observables: [
            { key: "o", title: "O", scale: "linear", unit: "m" },
            { key: "p", title: "P", scale: "event" },
          ],
          measurands: [
            { key: "x", observable: "o", reference: { family: "uniform", lower: 1, upper: 100 } },
            { key: "e", observable: "p" },
          ],
        },
      });
    // 0.9 / (0.9 + 0.01) = 0.989, above the rule's 0.95.
    expect(given(true)).toMatchObject({ compared: 2, silent: 1 });
    expect(given(false)).toMatchObject({ compared: 0, silent: 3, chiSquare: null });
  });
});

describe("on log10 a product of powers is linear in logarithms", () => {
  const power = (amplitude: Record<string, unknown>) =>
    scored({
      scale: "log10",
      hypothesis: {
        parameters: [
          { key: "q", prior: amplitude },
          { key: "n", prior: { family: "normal", mean: 2, sd: 0.5 } },
        ],
      },
      prediction: { expected: "3 * q * 1.5^n" },
      measurements: [
        { value: 40, sdDex: 0.1 },
        { value: 70, sdDex: 0.2 },
      ],
    });
  const y = [Math.log10(40), Math.log10(70)];
  const f = Math.log10(3) + 2 * Math.log10(1.5);
  const loads = (sd: number) => [sd, sd];
  const exponent = loads(0.5 * Math.log10(1.5));

  test("of a lognormal prior in closed form", () => {
    const { lnEvidence, lnEvidenceError, parameters } = power({
      family: "lognormal",
      median: 8,
      sdLog10: 0.3,
    });
    const covariance = covarianceOf([0.1, 0.2], loads(0.3), exponent);
    const middle = f + Math.log10(8);
    near(lnEvidence, lnNormal(y, [middle, middle], covariance));
    expect(lnEvidenceError).toBe(0);
    // Given log10 q the rest is normal: its posterior, by quadrature over z.
    const joint = (z: number) => {
      const mu = middle + 0.3 * z;
      return lnNormal(y, [mu, mu], covarianceOf([0.1, 0.2], exponent)) + lnDensity(z);
    };
    const moment = (k: number) =>
      Math.exp(
        lnIntegral((z) => joint(z) + k * Math.log(8 * 10 ** (0.3 * z)), -9, 9) - lnEvidence!,
      );
    near(parameters[0]!.mean, moment(1));
    near(parameters[0]!.sd, Math.sqrt(moment(2) - moment(1) ** 2), 1e-8);
    const below = (q: number) =>
      Math.exp(lnIntegral(joint, -9, Math.log10(q / 8) / 0.3) - lnEvidence!);
    parameters[0]!.quantiles.forEach((q, i) => near(below(q), [0.025, 0.5, 0.975][i]!));
  });

  test("of a loguniform prior over its box", () => {
    const { lnEvidence, degreesOfFreedom } = power({ family: "loguniform", lower: 1, upper: 100 });
    const joint = (x: number) =>
      lnNormal(y, [f + x, f + x], covarianceOf([0.1, 0.2], exponent)) - Math.log(2);
    near(lnEvidence, lnIntegral(joint, 0, 2));
    expect(degreesOfFreedom).toBe(1);
  });
});
