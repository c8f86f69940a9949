import { describe, expect, test } from "vitest";
import {
  asymmetricLn,
  covarianceOf,
  lnDensity,
  lnIntegral,
  lnNormal,
  lnPieces,
  phi,
} from "./testing/brute-force";
import { scored } from "./testing/one-measurand";

// Each form of reading against the formula of section 2 or a brute-force integral (testing/).
const near = (value: number | null, expected: number, error = 1e-9) =>
  expect(Math.abs(value! - expected)).toBeLessThan(error * Math.max(1, Math.abs(expected)));

const log10 = { scale: "log10" };
const normal = (sd: number, rest = {}) => ({ tolerance: { family: "normal", sd, ...rest } });
const uniformLn = (lnL: (mu: number) => number, lower: number, upper: number) =>
  lnIntegral(lnL, lower, upper, 2000) - Math.log(upper - lower);

describe("asymmetric uncertainties", () => {
  const readings = [
    { value: 10, plus: 2, minus: 1 },
    { value: 12.5, plus: 0.8, minus: 1.6 },
    { value: 11, plus: 1.5, minus: 0.6 },
  ];
  const lnL = (mu: number) =>
    readings.reduce(
      (sum, { value: x, plus, minus }) => sum + asymmetricLn(mu, { x, plus, minus }),
      0,
    );

  // Where the variance is clamped.
  const kinks = readings.flatMap(({ value, plus, minus }) => [value + plus, value - minus]);
  const within = (lower: number, upper: number) => [
    lower,
    ...kinks.filter((x) => x > lower && x < upper),
    upper,
  ];

  test("against an exact prediction are Barlow's clamped linear variance", () => {
    const { lnEvidence } = scored({ prediction: { expected: 11.2 }, measurements: readings });
    near(lnEvidence, lnL(11.2), 1e-12);
  });

  test("with one offset in common are integrated over it", () => {
    const { lnEvidence } = scored({
      prediction: { expected: 10.4, ...normal(0.9) },
      measurements: readings,
    });
    const inT = within(10.4 - 8.1, 10.4 + 8.1).map((mu) => (mu - 10.4) / 0.9);
    near(
      lnEvidence,
      lnPieces((t) => lnL(10.4 + 0.9 * t) + lnDensity(t), inT),
    );
  });

  test("with a flat level are integrated over it", () => {
    const { lnEvidence, standings } = scored({
      prediction: { tolerance: { family: "interval", lower: 9, upper: 11.5 } },
      measurements: readings,
    });
    near(lnEvidence, lnPieces(lnL, within(9, 11.5)) - Math.log(2.5));
    near(standings.noModel.lnEvidence, lnPieces(lnL, within(1, 100), 400) - Math.log(99));
  });

  test("with a flickering target are seen through its scatter, each by itself", () => {
    const { lnEvidence } = scored({
      measurand: { scatter: 0.7 },
      prediction: { expected: 11.2 },
      measurements: readings,
    });
    let expected = 0;
    for (const { value: x, plus, minus } of readings) {
      const seen = (t: number) => asymmetricLn(11.2 + 0.7 * t, { x, plus, minus }) + lnDensity(t);
      expected += lnPieces(seen, [-9, 9, (x - minus - 11.2) / 0.7, (x + plus - 11.2) / 0.7]);
    }
    near(lnEvidence, expected);
  });

  test("on log10 have their two sides in dex", () => {
    const { lnEvidence } = scored({
      ...log10,
      prediction: { expected: 11.2 },
      measurements: [{ value: 10, plus: 2, minus: 1 }],
    });
    const sides = { plus: Math.log10(12 / 10), minus: Math.log10(10 / 9) };
    near(lnEvidence, asymmetricLn(Math.log10(11.2), { x: 1, ...sides }), 1e-12);
  });

  test("alike on both sides are a plain uncertainty", () => {
    const prediction = { expected: 11.2, ...normal(0.5) };
    const plain = scored({ prediction, measurements: [{ value: 10, sd: 1.3 }] });
    const alike = scored({ prediction, measurements: [{ value: 10, plus: 1.3, minus: 1.3 }] });
    near(alike.lnEvidence, plain.lnEvidence!);
    near(alike.chiSquare, plain.chiSquare!);
  });
});

describe("limits", () => {
  test("with sd are censored readings", () => {
    const upper = { limit: "upper", value: 12, sd: 1.5 };
    const lower = { limit: "lower", value: 9, sd: 0.5 };
    const exact = scored({ prediction: { expected: 11 }, measurements: [upper, lower] });
    near(exact.lnEvidence, Math.log(phi((12 - 11) / 1.5)) + Math.log(phi((11 - 9) / 0.5)));
    expect(exact).toMatchObject({
      compared: 2,
      chiSquare: null,
      degreesOfFreedom: 0,
      pValue: null,
    });
  });

  test("with sd beside a value, under a tolerance, are integrated with it", () => {
    const { lnEvidence, chiSquare, degreesOfFreedom } = scored({
      prediction: { expected: 11, ...normal(2) },
      measurements: [
        { limit: "upper", value: 12, sd: 1.5 },
        { value: 13, sd: 1 },
      ],
    });
    const lnL = (mu: number) => Math.log(phi((12 - mu) / 1.5)) + lnDensity(13 - mu);
    near(
      lnEvidence,
      lnIntegral((t) => lnL(11 + 2 * t) + lnDensity(t), -9, 9, 60),
    );
    near(chiSquare, (13 - 11) ** 2 / (1 + 4));
    expect(degreesOfFreedom).toBe(1);
  });

  test("with sd under a scatter lose what it adds", () => {
    const { lnEvidence } = scored({
      ...log10,
      measurand: { scatter: 0.2 },
      prediction: { expected: 11 },
      measurements: [{ limit: "upper", value: 12, sdDex: 0.1 }],
    });
    near(lnEvidence, Math.log(phi(Math.log10(12 / 11) / Math.hypot(0.1, 0.2))));
  });

  test("with confidence are a reading of 0", () => {
    // Phi(1.6448536269514722) = 0.95 (Abramowitz & Stegun, table 26.5).
    const z = 1.6448536269514722;
    const limit = { limit: "upper", value: 4, confidence: 0.95 };
    const exact = scored({ prediction: { expected: 1.2 }, measurements: [limit] });
    near(exact.lnEvidence, lnDensity(1.2, 4 / z));
    expect(exact.chiSquare).toBeNull();
    const sigmas = scored({
      prediction: { expected: 1.2, ...normal(0.5) },
      measurements: [{ limit: "upper", value: 4, sigmas: 2 }],
    });
    near(sigmas.lnEvidence, lnDensity(1.2, Math.hypot(2, 0.5)));
  });
});

describe("linear noise on log10", () => {
  const lnL = (value: number, sd: number) => (mu: number) => lnDensity(value - 10 ** mu, sd);

  test("is normal in the natural unit, below zero too", () => {
    const { lnEvidence, chiSquare, degreesOfFreedom } = scored({
      ...log10,
      prediction: { expected: 1.5 },
      measurements: [
        { value: -0.4, sd: 1, noise: "linear" },
        { value: 2.2, sd: 0.5, noise: "linear" },
      ],
    });
    const mu = Math.log10(1.5);
    near(lnEvidence, lnL(-0.4, 1)(mu) + lnL(2.2, 0.5)(mu), 1e-12);
    near(chiSquare, 1.9 ** 2 + 1.4 ** 2);
    expect(degreesOfFreedom).toBe(2);
  });

  test("is integrated over a tolerance and over the reference", () => {
    const { lnEvidence, standings } = scored({
      ...log10,
      prediction: { expected: 1.5, ...normal(0.3) },
      measurements: [
        { value: -0.4, sd: 1, noise: "linear" },
        { value: 2.2, sd: 0.5, noise: "linear" },
      ],
    });
    const both = (mu: number) => lnL(-0.4, 1)(mu) + lnL(2.2, 0.5)(mu);
    const own = (t: number) => both(Math.log10(1.5) + 0.3 * t) + lnDensity(t);
    near(lnEvidence, lnIntegral(own, -9, 9));
    near(standings.noModel.lnEvidence, uniformLn(both, 0, 2));
  });

  test("of a limit is a reading of 0", () => {
    const { lnEvidence, chiSquare } = scored({
      ...log10,
      prediction: { expected: 1.5 },
      measurements: [{ limit: "upper", value: 3, sigmas: 3, noise: "linear" }],
    });
    near(lnEvidence, lnDensity(1.5, 1));
    expect(chiSquare).toBeNull();
  });
});

describe("magnitudes", () => {
  const magnitude = {
    scale: "magnitude",
    measurand: { reference: { family: "normal", mean: 20, sd: 3 } },
  };

  test("are compared as they are", () => {
    const { lnEvidence } = scored({
      ...magnitude,
      prediction: { expected: 20, ...normal(0.4) },
      measurements: [
        { value: 20.5, sd: 0.1 },
        { value: 20.2, sd: 0.2 },
      ],
    });
    near(lnEvidence, lnNormal([20.5, 20.2], [20, 20], covarianceOf([0.1, 0.2], [0.4, 0.4])));
  });

  test("not reached are a flux compatible with zero, and those passed are censored", () => {
    const fainter = { limit: "fainter", value: 22.4, sigmas: 5 };
    const brighter = { limit: "brighter", value: 18, sd: 0.3 };
    const exact = scored({
      ...magnitude,
      prediction: { expected: 22 },
      measurements: [fainter, brighter],
    });
    const expected = lnDensity(5 * 10 ** (-0.4 * (22 - 22.4))) + Math.log(phi((18 - 22) / 0.3));
    near(exact.lnEvidence, expected);
    const tolerant = scored({
      ...magnitude,
      prediction: { expected: 22, ...normal(1) },
      measurements: [fainter],
    });
    const lnL = (t: number) => lnDensity(5 * 10 ** (-0.4 * (22 + t - 22.4))) + lnDensity(t);
    near(tolerant.lnEvidence, lnIntegral(lnL, -9, 9));
  });

  test("take a relative shared error as 2.5 sd / ln 10", () => {
    const { lnEvidence } = scored({
      ...magnitude,
      prediction: { expected: 20 },
      measurements: [1, 1].map((coefficient, i) => ({
        value: 20.2 + i / 10,
        sd: 0.1,
        shared: [{ error: "flux", coefficient }],
      })),
      document: { sharedErrors: [{ key: "flux", sd: 0.05, relative: true }] },
    });
    const load = (2.5 * 0.05) / Math.LN10;
    near(lnEvidence, lnNormal([20.2, 20.3], [20, 20], covarianceOf([0.1, 0.1], [load, load])));
  });
});

describe("on a circle", () => {
  const circle = {
    scale: "cyclic",
    observable: { unit: "deg", period: 180 },
    measurand: { reference: null },
  };
  const wrap = (d: number) => d - 180 * Math.round(d / 180);

  test("differences are wrapped once", () => {
    const { lnEvidence, chiSquare } = scored({
      ...circle,
      prediction: { expected: 178, ...normal(3) },
      measurements: [
        { value: 2, sd: 2 },
        { value: 175, sd: 2 },
      ],
    });
    const covariance = covarianceOf([2, 2], [3, 3]);
    near(lnEvidence, lnNormal([4, -3], [0, 0], covariance));
    // r' C^-1 r of a 2 x 2 matrix, written out.
    near(chiSquare, (13 * 16 + 13 * 9 + 2 * 9 * 12) / (13 ** 2 - 81));
  });

  test("silence is the whole circle, and an interval may run through the end", () => {
    const readings = [
      { value: 2, sd: 9 },
      { value: 170, sd: 6 },
    ];
    const lnL = (mu: number) =>
      readings.reduce((sum, { value, sd }) => sum + lnDensity(wrap(value - mu), sd), 0);
    const { lnEvidence, standings } = scored({
      ...circle,
      prediction: { tolerance: { family: "interval", lower: 160, upper: 10 } },
      measurements: readings,
    });
    // Cut at the kinks: opposite the readings.
    near(standings.noModel.lnEvidence, lnPieces(lnL, [0, 80, 92, 180]) - Math.log(180));
    near(lnEvidence, lnIntegral(lnL, 160, 190) - Math.log(30));
  });
});
