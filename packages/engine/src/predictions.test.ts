import { describe, expect, test } from "vitest";
import {
  asymmetricLn,
  covarianceOf,
  lnDensity,
  lnIntegral,
  lnNormal,
  lnPieces,
  phi,
  quadratic,
} from "./testing/brute-force";
import { scored } from "./testing/one-measurand";

// Each form of prediction against a dense normal density or a brute-force integral (testing/).
const near = (value: number | null, expected: number, error = 1e-9) =>
  expect(Math.abs(value! - expected)).toBeLessThan(error * Math.max(1, Math.abs(expected)));

describe("a split normal tolerance", () => {
  const readings = [
    { value: 8, sd: 1 },
    { value: 9, sd: 2 },
  ];
  const split = { family: "splitNormal", plus: 7, minus: 2 };
  const prior = (delta: number) => lnDensity(delta / (delta < 0 ? 2 : 7)) + Math.log(2 / (7 + 2));

  test("is two half-normals joined where it is expected", () => {
    const { lnEvidence } = scored({
      prediction: { expected: 5, tolerance: split },
      measurements: readings,
    });
    const lnL = (delta: number) => lnDensity(3 - delta, 1) + lnDensity(4 - delta, 2) + prior(delta);
    near(lnEvidence, lnPieces(lnL, [-20, 0, 60], 200));
  });

  test("is penalised by the side that the minimum is on", () => {
    const { chiSquare, degreesOfFreedom } = scored({
      prediction: { expected: 5, tolerance: split },
      measurements: readings,
    });
    // Above, it is a normal of 7: r' (D + 49 J)^-1 r.
    near(chiSquare, quadratic([3, 4], covarianceOf([1, 2], [7, 7])));
    expect(degreesOfFreedom).toBe(2);
  });
});

describe("an interval", () => {
  test("of each measurement's own is flat for each of them", () => {
    const { lnEvidence, chiSquare, degreesOfFreedom } = scored({
      prediction: { tolerance: { family: "interval", lower: 5, upper: 8, sharing: "each" } },
      measurements: [
        { value: 9, sd: 1 },
        { value: 6, sd: 0.5 },
      ],
    });
    const flat = (y: number, sd: number) => Math.log((phi((y - 5) / sd) - phi((y - 8) / sd)) / 3);
    near(lnEvidence, flat(9, 1) + flat(6, 0.5));
    near(chiSquare, 1);
    // The second one's own minimum is inside its bounds.
    expect(degreesOfFreedom).toBe(1);
  });

  test("of each one's own takes asymmetric readings and limits", () => {
    const { lnEvidence } = scored({
      prediction: { tolerance: { family: "interval", lower: 5, upper: 8, sharing: "each" } },
      measurements: [
        { value: 9, plus: 1, minus: 2 },
        { limit: "upper", value: 6, sd: 0.5 },
      ],
    });
    const first = lnPieces((t) => asymmetricLn(t, { x: 9, plus: 1, minus: 2 }), [5, 7, 8]);
    const second = lnIntegral((t) => Math.log(phi((6 - t) / 0.5)), 5, 8, 30);
    near(lnEvidence, first + second - 2 * Math.log(3));
  });

  test("in common costs a degree of freedom where the minimum is inside", () => {
    const both = (lower: number, upper: number) =>
      scored({
        prediction: { tolerance: { family: "interval", lower, upper } },
        measurements: [
          { value: 6, sd: 1 },
          { value: 8, sd: 1 },
        ],
      });
    expect(both(5, 9)).toMatchObject({ chiSquare: 2, degreesOfFreedom: 1 });
    expect(both(8, 9)).toMatchObject({ chiSquare: 4, degreesOfFreedom: 2 });
  });

  test("with one end runs to the reference's far end", () => {
    const one = (tolerance: Record<string, unknown>) =>
      scored({ prediction: { tolerance }, measurements: [{ value: 30, sd: 4 }] }).lnEvidence;
    near(
      one({ family: "atMost", bound: 28 }),
      one({ family: "interval", lower: 1, upper: 28 })!,
      1e-12,
    );
    near(
      one({ family: "atLeast", bound: 28 }),
      one({ family: "interval", lower: 28, upper: 100 })!,
      1e-12,
    );
  });
});

describe("correlations", () => {
  test("between measurements are their noises'", () => {
    const { lnEvidence, chiSquare } = scored({
      measurand: { scatter: 0.5 },
      prediction: { expected: 5, tolerance: { family: "normal", sd: 2 } },
      measurements: [
        { value: 6, sd: 1 },
        { value: 7.5, sd: 2 },
      ],
      document: { correlations: [{ a: "m0", b: "m1", coefficient: 0.6 }] },
    });
    const covariance = [
      [1 + 0.25 + 4, 0.6 * 2 + 4],
      [0.6 * 2 + 4, 4 + 0.25 + 4],
    ];
    near(lnEvidence, lnNormal([6, 7.5], [5, 5], covariance));
    near(chiSquare, quadratic([1, 2.5], covariance));
  });

  test("that are no covariance are refused by name", () => {
    const three = () =>
      scored({
        prediction: { expected: 5 },
        measurements: [6, 7, 8].map((value) => ({ value, sd: 1 })),
        document: {
          correlations: [
            { a: "m0", b: "m1", coefficient: 0.9 },
            { a: "m1", b: "m2", coefficient: 0.9 },
            { a: "m0", b: "m2", coefficient: -0.9 },
          ],
        },
      });
    expect(three).toThrow(/correlations.*not-positive-definite/);
  });

  test("between tolerances tie two measurands", () => {
    const { lnEvidence } = scored({
      prediction: { expected: 5, tolerance: { family: "normal", sd: 2 } },
      measurements: [
        { value: 6, sd: 1 },
        { value: 30, sd: 3, measurand: "y" },
      ],
      hypothesis: {
        predictions: [
          { measurand: "x", expected: 5, tolerance: { family: "normal", sd: 2 } },
          { measurand: "y", expected: 26, tolerance: { family: "normal", sd: 4 } },
        ],
        toleranceCorrelations: [{ a: "x", b: "y", coefficient: -0.5 }],
      },
      document: {
        measurands: ["x", "y"].map((key) => ({
          key,
          observable: "o",
          reference: { family: "uniform", lower: 1, upper: 100 },
        })),
      },
    });
    const covariance = [
      [1 + 4, -0.5 * 8],
      [-0.5 * 8, 9 + 16],
    ];
    near(lnEvidence, lnNormal([6, 30], [5, 26], covariance));
  });
});

describe("a relative shared error", () => {
  const flux = { sharedErrors: [{ key: "flux", sd: 0.2, relative: true }] };
  const readings = [1.5, 1].map((value) => ({
    value,
    sd: 0.1 * value,
    shared: [{ error: "flux" }],
  }));

  test("is a share of what is expected, and of no tolerance", () => {
    const { lnEvidence } = scored({
      prediction: { expected: 1.2, tolerance: { family: "normal", sd: 0.3 } },
      measurements: readings,
      document: flux,
    });
    const covariance = covarianceOf([0.15, 0.1], [0.24, 0.24], [0.3, 0.3]);
    near(lnEvidence, lnNormal([1.5, 1], [1.2, 1.2], covariance));
  });

  test("is a share of a level that is integrated", () => {
    const { lnEvidence, standings } = scored({
      measurand: { reference: { family: "normal", mean: 2, sd: 1 } },
      prediction: { tolerance: { family: "interval", lower: 0.8, upper: 2 } },
      measurements: readings,
      document: flux,
    });
    const lnL = (level: number) =>
      lnNormal([1.5, 1], [level, level], covarianceOf([0.15, 0.1], [0.2 * level, 0.2 * level]));
    near(lnEvidence, lnIntegral(lnL, 0.8, 2) - Math.log(1.2));
    const silent = (z: number) => lnL(2 + z) + lnDensity(z);
    near(standings.noModel.lnEvidence, lnIntegral(silent, -9, 9));
  });

  test("is a share of what a parameter makes expected", () => {
    const { lnEvidence } = scored({
      hypothesis: {
        parameters: [{ key: "q", prior: { family: "normal", mean: 1.3, sd: 0.2 } }],
      },
      prediction: { expected: "q" },
      measurements: readings,
      document: flux,
    });
    const lnL = (z: number) => {
      const q = 1.3 + 0.2 * z;
      const loads = [0.2 * q, 0.2 * q];
      return lnNormal([1.5, 1], [q, q], covarianceOf([0.15, 0.1], loads)) + lnDensity(z);
    };
    near(lnEvidence, lnIntegral(lnL, -9, 9));
  });
});

describe("a curve", () => {
  const curve = {
    observable: { conditions: [{ key: "t", unit: "s" }] },
    measurand: {
      shape: "curve",
      where: { t: [0, 10] },
      scatter: 0.3,
      reference: { family: "polynomial", in: "t", degree: 3, centre: 20, sd: 5, scatter: 0.4 },
    },
  };
  const ts = [0, 2.5, 2.5, 7, 10];
  const ys = [18, 21, 20.5, 26, 30];
  const readings = ts.map((t, i) => ({ value: ys[i]!, sd: 0.5, conditions: { t } }));
  const legendre = [
    (x: number) => (x === x ? 1 : 0),
    (x: number) => x,
    (x: number) => (3 * x * x - 1) / 2,
    (x: number) => (5 * x ** 3 - 3 * x) / 2,
  ];

  test("is charged its polynomial where a hypothesis is silent", () => {
    const { standings } = scored({ ...curve, prediction: null, measurements: readings });
    const columns = legendre.map((p) => ts.map((t) => 5 * p(t / 5 - 1)));
    const own = Math.hypot(0.5, 0.3, 0.4);
    const covariance = covarianceOf(
      ts.map(() => own),
      ...columns,
    );
    near(
      standings.noModel.lnEvidence,
      lnNormal(
        ys,
        ts.map(() => 20),
        covariance,
      ),
    );
  });

  test("has what is expected at each condition, and a smooth tolerance along it", () => {
    const { lnEvidence, chiSquare } = scored({
      ...curve,
      prediction: {
        expected: "17 + t",
        tolerance: { family: "normal", sd: 1.5, sharing: "smooth", in: "t", length: 4 },
      },
      measurements: readings,
    });
    const covariance = ts.map((a, i) =>
      ts.map((b, j) => 2.25 * Math.exp(-Math.abs(a - b) / 4) + (i === j ? 0.25 + 0.09 : 0)),
    );
    near(
      lnEvidence,
      lnNormal(
        ys,
        ts.map((t) => 17 + t),
        covariance,
      ),
    );
    near(
      chiSquare,
      quadratic(
        ys.map((y, i) => y - 17 - ts[i]!),
        covariance,
      ),
    );
  });

  test("has a relative tolerance, common, each and smooth", () => {
    const f = ts.map((t) => 17 + t);
    const own = Math.hypot(0.5, 0.3);
    const ln = (rest: Record<string, unknown>) =>
      scored({
        ...curve,
        prediction: {
          expected: "17 + t",
          tolerance: { family: "normal", sd: 0.05, relative: true, ...rest },
        },
        measurements: readings,
      }).lnEvidence;
    const load = f.map((one) => 0.05 * one);
    near(
      ln({}),
      lnNormal(
        ys,
        f,
        covarianceOf(
          ts.map(() => own),
          load,
        ),
      ),
    );
    near(
      ln({ sharing: "each" }),
      lnNormal(ys, f, covarianceOf(load.map((one) => Math.hypot(own, one)))),
    );
    const smooth = ts.map((a, i) =>
      ts.map(
        (b, j) => load[i]! * load[j]! * Math.exp(-Math.abs(a - b) / 4) + (i === j ? own * own : 0),
      ),
    );
    near(ln({ sharing: "smooth", in: "t", length: 4 }), lnNormal(ys, f, smooth));
  });

  test("loads relative shared errors by what is expected there", () => {
    const { lnEvidence } = scored({
      ...curve,
      prediction: { expected: "17 + t" },
      measurements: readings.map((one) => ({ ...one, shared: [{ error: "flux" }] })),
      document: { sharedErrors: [{ key: "flux", sd: 0.1, relative: true }] },
    });
    const f = ts.map((t) => 17 + t);
    const own = Math.hypot(0.5, 0.3);
    const covariance = covarianceOf(
      ts.map(() => own),
      f.map((one) => 0.1 * one),
    );
    near(lnEvidence, lnNormal(ys, f, covariance));
  });
});
