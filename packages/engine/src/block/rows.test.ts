import { describe, expect, test } from "vitest";
import {
  blockProblem,
  denseNormal,
  randomNumbers,
  type BlockTerms,
} from "../testing/block-problems";
import { panels } from "../testing/panels";
import { blockEvidence } from "./evidence";
import { censoredFactor, linearNoiseFactor } from "./factors";
import { blockFit } from "./fit";
import { uniformUnknown } from "./outer-unknowns";
import { ASYMMETRIC, EACH_FLAT, FACTOR, NORMAL, type LinearUnknown } from "./problem";

// Against plain quadrature, dense matrices and brute-force minima written out here.
const Z: LinearUnknown = { kind: "normal" };

function lnZ(terms: BlockTerms): number {
  const found = blockEvidence(blockProblem(terms));
  if (!found.ok) throw new Error(found.refusal.kind);
  return found.ln;
}

function fitted(terms: BlockTerms) {
  const fit = blockFit(blockProblem(terms));
  if (!fit?.ok) throw new Error("refused");
  return fit;
}

const phi = (z: number, variance = 1) =>
  Math.exp((-z * z) / 2 / variance) / Math.sqrt(2 * Math.PI * variance);
const cdf = (z: number) => panels((x) => phi(x), -9, Math.max(z, -9), 3);

describe("rows that aren't Gaussian on a smooth process", () => {
  test("a censored reading between values: the process at its place is integrated over", () => {
    const x = [0, 0.4, 0.7, 1.5];
    const [sd, length] = [0.8, 0.6];
    const observed = [0.5, 0, 0.9, -0.2];
    const variance = [0.04, 0, 0.02, 0.03];
    const found = lnZ({
      observed,
      variance,
      kind: [NORMAL, FACTOR, NORMAL, NORMAL],
      rows: {
        factors: [null, censoredFactor({ limit: 0.1, sd: 0.3, side: -1, extra: 0 }), null, null],
        smooth: [{ sd, length, rows: Int32Array.of(0, 1, 2, 3), x: Float64Array.from(x) }],
      },
    });
    const covariance = x.map((a, i) =>
      x.map((b, j) => sd * sd * Math.exp(-Math.abs(a - b) / length) + (i === j ? variance[i]! : 0)),
    );
    const z = panels(
      (h) => Math.exp(denseNormal([0.5, h, 0.9, -0.2], covariance).ln) * cdf((h - 0.1) / 0.3),
      -6,
      6,
      60,
    );
    expect(Math.abs(found - Math.log(z))).toBeLessThan(1e-9);
  });

  test("asymmetric readings: normal with the variance at the best fit, the process in it", () => {
    const x = [0, 0.4, 0.7, 1.5];
    const [sd, length] = [0.8, 0.6];
    const observed = [0.5, 0.2, 0.9, -0.2];
    const plus = [0.3, 0.2, 0.3, 0.1];
    const minus = [0.1, 0.4, 0.2, 0.3];
    const terms = {
      observed,
      variance: [0, 0, 0.01, 0],
      kind: observed.map(() => ASYMMETRIC),
      rows: {
        asymmetric: { plus: Float64Array.from(plus), minus: Float64Array.from(minus) },
        smooth: [{ sd, length, rows: Int32Array.of(0, 1, 2, 3), x: Float64Array.from(x) }],
      },
    };
    let v = plus.map((p, i) => p * minus[i]!);
    const covariance = () =>
      x.map((a, i) =>
        x.map(
          (b, j) =>
            sd * sd * Math.exp(-Math.abs(a - b) / length) +
            (i === j ? v[i]! + terms.variance[i]! : 0),
        ),
      );
    for (let round = 0; round < 300; round += 1) {
      const weights = solveDense(covariance(), observed);
      v = v.map((one, i) => variance(-one * weights[i]!, plus[i]!, minus[i]!));
    }
    let expected = denseNormal(observed, covariance()).ln;
    v.forEach((one, i) => (expected += Math.log((Math.sqrt(one) * 2) / (plus[i]! + minus[i]!))));
    expect(Math.abs(lnZ(terms) - expected)).toBeLessThan(1e-9);
  });
});

function variance(d: number, plus: number, minus: number): number {
  const v = plus * minus + (plus - minus) * d;
  return Math.min(Math.max(v, Math.min(plus, minus) ** 2), Math.max(plus, minus) ** 2);
}

function solveDense(matrix: number[][], right: readonly number[]): number[] {
  const n = right.length;
  const a = matrix.map((row, i) => [...row, right[i]!]);
  for (let j = 0; j < n; j += 1) {
    for (let i = j + 1; i < n; i += 1) {
      const share = a[i]![j]! / a[j]![j]!;
      for (let k = j; k <= n; k += 1) a[i]![k]! -= share * a[j]![k]!;
    }
  }
  for (let j = n - 1; j >= 0; j -= 1) {
    for (let k = j + 1; k < n; k += 1) a[j]![n]! -= a[j]![k]! * a[k]![n]!;
    a[j]![n]! /= a[j]![j]!;
  }
  return a.map((row) => row[n]!);
}

describe("the least chi-square of rows that aren't linear in mu", () => {
  const least = (square: (mu: number) => number, lower: number, upper: number) => {
    let best = Infinity;
    for (let n = 0; n <= 1_000_000; n += 1) {
      best = Math.min(best, square(lower + ((upper - lower) * n) / 1_000_000));
    }
    return best;
  };

  test("asymmetric readings and a common offset: V as it stands at each mu", () => {
    const observed = [1.9, 2.4, 3.1];
    const plus = [0.7, 0.6, 0.5];
    const minus = [0.5, 0.8, 0.4];
    const { chiSquare } = fitted({
      observed,
      variance: [0, 0, 0],
      kind: observed.map(() => ASYMMETRIC),
      rows: { asymmetric: { plus: Float64Array.from(plus), minus: Float64Array.from(minus) } },
      linear: [Z],
      design: observed.map(() => [0.5]),
      evaluate: (_outer, _scenario, { base }) => {
        base.fill(2);
        return true;
      },
    });
    const expected = least(
      (mu) =>
        ((mu - 2) / 0.5) ** 2 +
        observed.reduce(
          (sum, y, i) => sum + (mu - y) ** 2 / variance(mu - y, plus[i]!, minus[i]!),
          0,
        ),
      1,
      4,
    );
    expect(Math.abs(chiSquare / expected - 1)).toBeLessThan(1e-9);
  });

  test("minima on the clamp's edge, and the lower of two minima, are found", () => {
    for (let seed = 1; seed <= 25; seed += 1) {
      const random = randomNumbers(seed);
      const count = 1 + Math.floor(3 * random());
      const observed = Array.from({ length: count }, () => 4 * random());
      const plus = observed.map(() => 10 ** (1.5 * random() - 1));
      const minus = observed.map(() => 10 ** (1.5 * random() - 1));
      const design = observed.map(() => [2 * random() - 0.5]);
      const start = 4 * random();
      const { chiSquare } = fitted({
        observed,
        variance: observed.map(() => 0),
        kind: observed.map(() => ASYMMETRIC),
        rows: { asymmetric: { plus: Float64Array.from(plus), minus: Float64Array.from(minus) } },
        linear: [Z],
        design,
        evaluate: (_outer, _scenario, { base }) => {
          base.fill(start);
          return true;
        },
      });
      const square = (z: number) =>
        observed.reduce((sum, y, i) => {
          const d = start + design[i]![0]! * z - y;
          return sum + (d * d) / variance(d, plus[i]!, minus[i]!);
        }, z * z);
      let best = 0;
      for (let n = -12_000; n <= 12_000; n += 1) {
        if (square(n / 1000) < square(best)) best = n / 1000;
      }
      for (let step = 1e-4; step > 1e-13; step /= 8) {
        const from = best;
        for (let n = -40; n <= 40; n += 1) {
          if (square(from + n * step) < square(best)) best = from + n * step;
        }
      }
      expect(Math.abs(chiSquare / square(best) - 1)).toBeLessThan(1e-10);
    }
  });

  test("flat tolerances of each one's own: within them nothing is charged, and each costs one", () => {
    const observed = [0.1, -0.9, 1.8];
    const { chiSquare, flatInside } = fitted({
      observed,
      variance: [0.04, 0.01, 0.09],
      kind: observed.map(() => EACH_FLAT),
      linear: [Z],
      design: observed.map(() => [0.2]),
      rows: {
        eachFlat: {
          lower: Float64Array.from(observed, () => -0.5),
          upper: Float64Array.from(observed, () => 0.5),
        },
      },
    });
    const expected = least(
      (mu) =>
        (mu / 0.2) ** 2 +
        observed.reduce((sum, y, i) => {
          const beyond = Math.max(Math.abs(y - mu) - 0.5, 0);
          return sum + beyond ** 2 / [0.04, 0.01, 0.09][i]!;
        }, 0),
      -1,
      1,
    );
    expect(Math.abs(chiSquare / expected - 1)).toBeLessThan(1e-9);
    expect(flatInside).toBe(1);
  });

  test("values with noise that is normal in flux; a limit beside them says nothing", () => {
    const values = [3, 1.2, -0.4];
    const { chiSquare } = fitted({
      observed: [0, 0, 0, 0],
      variance: [0, 0, 0, 0],
      kind: [FACTOR, FACTOR, FACTOR, FACTOR],
      linear: [Z],
      design: [[0.4], [0.4], [0.4], [0.4]],
      rows: {
        factors: [
          ...values.map((value) => linearNoiseFactor({ value, sd: 0.8, extra: 0, centre: 0 })),
          censoredFactor({ limit: -3, sd: 0.1, side: 1, extra: 0 }),
        ],
      },
    });
    const expected = least(
      (mu) =>
        (mu / 0.4) ** 2 + values.reduce((sum, value) => sum + ((value - 10 ** mu) / 0.8) ** 2, 0),
      -2,
      2,
    );
    expect(Math.abs(chiSquare / expected - 1)).toBeLessThan(1e-9);
  });
});

test("a flat level: one degree of freedom where its minimum is inside, none at a bound", () => {
  const level = (lower: number, upper: number) =>
    fitted({
      observed: [0.9, 1.1],
      variance: [0.01, 0.01],
      linear: [{ kind: "flat", lower, upper, width: upper - lower }],
      design: [[1], [1]],
    });
  expect(level(0, 2).flatInside).toBe(1);
  expect(Math.abs(level(0, 2).chiSquare - 2)).toBeLessThan(1e-12);
  expect(level(0, 0.8).flatInside).toBe(0);
  expect(Math.abs(level(0, 0.8).chiSquare - 10)).toBeLessThan(1e-10);
});

test("a share of a fitted level: loadings at the fit that they give", () => {
  const x = [-1, -0.5, 0, 0.5, 1];
  const observed = [0.2, 0.9, 1.3, 2.2, 2.6];
  const noise = observed.map(() => 0.01);
  const terms = (unknown: number) => ({
    observed,
    variance: noise,
    linear: [Z, Z, Z],
    design: x.map((at) => [2, 2 * at, 0]),
    atFit: [
      {
        unknown,
        coefficient: Float64Array.from(x, () => 0.1),
        level: Float64Array.from(x, () => 5),
        of: [0, 1],
      },
    ],
  });
  // Rows are counted from 5: the level there is 5 and the polynomial.
  let load = observed.map((y) => 0.1 * (5 + y));
  const covariance = () =>
    x.map((a, i) =>
      x.map((b, j) => 4 + 4 * a * b + load[i]! * load[j]! + (i === j ? noise[i]! : 0)),
    );
  for (let round = 0; round < 500; round += 1) {
    const w = solveDense(covariance(), observed);
    const constant = 4 * w.reduce((sum, value) => sum + value, 0);
    const slope = 4 * w.reduce((sum, value, i) => sum + value * x[i]!, 0);
    load = x.map((at) => 0.1 * (5 + constant + slope * at));
  }
  const expected = denseNormal(observed, covariance());
  expect(Math.abs(lnZ(terms(2)) - expected.ln)).toBeLessThan(1e-9);
  expect(Math.abs(fitted(terms(2)).chiSquare - expected.chiSquare)).toBeLessThan(1e-9);
});

test("on a circle the difference from what is expected is wrapped once", () => {
  const at = (expected: number) =>
    lnZ({
      observed: [350, 10],
      variance: [25, 16],
      linear: [Z],
      design: [[6], [6]],
      rows: { period: Float64Array.of(360, 360) },
      evaluate: (_outer, _scenario, { base }) => {
        base.fill(expected);
        return true;
      },
    });
  const { ln } = denseNormal(
    [-15, 5],
    [
      [61, 36],
      [36, 52],
    ],
  );
  expect(Math.abs(at(5) - ln)).toBeLessThan(1e-12);
  expect(Math.abs(at(365) - ln)).toBeLessThan(1e-12);
});

test("a level anywhere on a circle", () => {
  const found = lnZ({
    observed: [350, 10],
    variance: [25, 16],
    rows: { period: Float64Array.of(360, 360) },
    outer: [uniformUnknown({ lower: 0, upper: 360 }, { counted: true, breaks: [170, 190] })],
    evaluate: ([level], _scenario, { base }) => {
      base.fill(level!);
      return true;
    },
  });
  const wrapped = (d: number) => d - 360 * Math.round(d / 360);
  const z = panels(
    (t) => (phi(wrapped(350 - t), 25) * phi(wrapped(10 - t), 16)) / 360,
    0,
    360,
    720,
  );
  expect(Math.abs(found - Math.log(z))).toBeLessThan(1e-9);
});

test("numbers near 2460000 keep their digits: rows are counted from a centre", () => {
  const random = randomNumbers(9);
  const centre = 2_460_000.25;
  const observed = Array.from({ length: 8 }, () => 1e-4 * (random() - 0.5));
  const variance = observed.map(() => 1e-8);
  const { ln, chiSquare } = denseNormal(
    observed,
    observed.map((_, i) => observed.map((__, j) => 1e-6 + (i === j ? 1e-8 : 0))),
  );
  const terms: BlockTerms = {
    observed,
    variance,
    linear: [Z],
    design: observed.map(() => [1e-3]),
    evaluate: (_outer, _scenario, { base }) => {
      base.fill(2_460_000.25 - centre);
      return true;
    },
  };
  expect(Math.abs(lnZ(terms) / ln - 1)).toBeLessThan(1e-10);
  expect(Math.abs(fitted(terms).chiSquare / chiSquare - 1)).toBeLessThan(1e-10);
});

test("an offset that dwarfs the noise a million times keeps the digits of both", () => {
  // Mean and difference part: N(0, 1 + s^2/2) and N(0, 2 s^2), s = 1e-6.
  const found = lnZ({
    observed: [0.3, 0.3 + 1e-6],
    variance: [1e-12, 1e-12],
    linear: [Z],
    design: [[1], [1]],
  });
  const mean = 0.3 + 5e-7;
  const difference = 0.3 + 1e-6 - 0.3;
  const expected = Math.log(phi(mean, 1 + 5e-13)) + Math.log(phi(difference, 2e-12));
  expect(Math.abs(found / expected - 1)).toBeLessThan(1e-9);
});
