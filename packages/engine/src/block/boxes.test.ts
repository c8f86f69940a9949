import { describe, expect, test } from "vitest";
import {
  blockProblem,
  denseNormal,
  randomNumbers,
  type BlockTerms,
} from "../testing/block-problems";
import { panels } from "../testing/panels";
import { blockEvidence } from "./evidence";
import { censoredFactor } from "./factors";
import { uniformUnknown } from "./outer-unknowns";
import { EACH_FLAT, FACTOR, type LinearUnknown } from "./problem";

// Checked against plain Gauss-Legendre over the levels, or over what couples them.
const Z: LinearUnknown = { kind: "normal" };
const flat = (lower: number, upper: number): LinearUnknown => ({
  kind: "flat",
  lower,
  upper,
  width: upper - lower,
});

function found(terms: BlockTerms) {
  const outcome = blockEvidence(blockProblem(terms));
  if (!outcome.ok) throw new Error(outcome.refusal.kind);
  return outcome;
}

const phi = (z: number, variance = 1) =>
  Math.exp((-z * z) / 2 / variance) / Math.sqrt(2 * Math.PI * variance);

test("one level, its bounds cutting through the likelihood", () => {
  const { ln, error } = found({
    observed: [0.95, 1.1],
    variance: [0.01, 0.04],
    linear: [flat(-1, 1)],
    design: [[1], [1]],
  });
  const z = panels((t) => (phi(0.95 - t, 0.01) * phi(1.1 - t, 0.04)) / 2, -1, 1);
  expect(Math.abs(ln - Math.log(z))).toBeLessThan(1e-10);
  expect(error).toBe(0);
});

test("two levels that a shared error couples, both cut", () => {
  const observed = [0.9, 1.05, 2.1];
  const variance = [0.01, 0.02, 0.03];
  const load = [0.2, 0.2, 0.3];
  const { ln } = found({
    observed,
    variance,
    linear: [Z, flat(-1, 1), flat(1.9, 2.05)],
    design: [
      [0.2, 1, 0],
      [0.2, 1, 0],
      [0.3, 0, 1],
    ],
  });
  const covariance = load.map((a, i) => load.map((b, j) => a * b + (i === j ? variance[i]! : 0)));
  const z = panels(
    (a) =>
      panels(
        (b) => Math.exp(denseNormal([0.9 - a, 1.05 - a, 2.1 - b], covariance).ln),
        1.9,
        2.05,
        3,
      ),
    -1,
    1,
    20,
  );
  expect(Math.abs(ln - Math.log(z / 2 / 0.15))).toBeLessThan(1e-8);
});

test("a parameter and a level that only their sum is known of", () => {
  const { ln } = found({
    observed: [0.5],
    variance: [0.01],
    linear: [flat(0, 1), flat(-1, 1)],
    design: [[1, 1]],
  });
  const z = panels((a) => panels((b) => phi(0.5 - a - b, 0.01), -1, 1, 20), 0, 1, 20);
  expect(Math.abs(ln - Math.log(z / 2))).toBeLessThan(1e-8);
});

describe("many levels that few shared errors couple", () => {
  const levels = 7;
  const observed = Array.from({ length: levels }, (_, m) => m + 0.04 * (m - 3));
  const variance = observed.map((_, m) => 0.01 + 0.002 * m);
  const load = observed.map((_, m) => 0.1 + 0.02 * m);
  const bounds = observed.map((_, m) => flat(m - 0.5, m + 0.1));
  const lnExpected = (also: readonly number[]) => {
    const row = (m: number, shift: number) =>
      panels((t) => phi(observed[m]! - t - shift, variance[m]!) / 0.6, m - 0.5, m + 0.1, 6);
    let sum = 0;
    const integral = panels(
      (z) =>
        panels(
          (w) => {
            let product = phi(z) * (also.length > 0 ? phi(w) : 1);
            for (let m = 0; m < levels; m += 1)
              product *= row(m, load[m]! * z + (also[m] ?? 0) * w);
            return product;
          },
          also.length > 0 ? -7 : 0,
          also.length > 0 ? 7 : 1,
          also.length > 0 ? 4 : 1,
        ),
      -7,
      7,
      5,
    );
    sum += Math.log(integral);
    return sum;
  };

  test("one: by quadrature over it", () => {
    const { ln } = found({
      observed,
      variance,
      linear: [Z, ...bounds],
      design: observed.map((_, m) => [load[m]!, ...bounds.map((__, f) => (f === m ? 1 : 0))]),
    });
    expect(Math.abs(ln - lnExpected([]))).toBeLessThan(1e-7);
  });

  test("three, two of them proportional: on a lattice, within three stated errors", () => {
    const also = observed.map((_, m) => 0.15 - 0.03 * m);
    const { ln, error } = found({
      observed,
      variance,
      linear: [Z, Z, Z, ...bounds],
      design: observed.map((_, m) => [
        load[m]!,
        0.6 * also[m]!,
        0.8 * also[m]!,
        ...bounds.map((__, f) => (f === m ? 1 : 0)),
      ]),
    });
    expect(error).toBeLessThan(1e-3);
    expect(error).toBeGreaterThan(0);
    expect(Math.abs(ln - lnExpected(also))).toBeLessThan(3 * error);
  });
});

test("six censored readings in four directions: on a lattice, within three stated errors", () => {
  const random = randomNumbers(5);
  const design = Array.from({ length: 6 }, (_, o) =>
    [0, 1, 2, 3].map((k) => (k === o % 4 || k === 3 ? 0.5 + random() : 0)),
  );
  const limits = [0.3, -0.2, 0.5, 0.1, 0.4, -0.1];
  const sides = [1, -1, 1, 1, -1, 1] as const;
  const { ln, error } = found({
    observed: limits,
    variance: limits.map(() => 0),
    kind: limits.map(() => FACTOR),
    linear: [Z, Z, Z, Z],
    design,
    rows: {
      factors: limits.map((limit, o) =>
        censoredFactor({ limit, sd: 0.6, side: sides[o]!, extra: 0 }),
      ),
    },
  });
  // Given the last, each of the others is met by two readings at most.
  const cdf = (z: number) => panels((x) => phi(x), -8, Math.max(z, -8), 2);
  const factor = (o: number, sum: number) => cdf((sides[o]! * (limits[o]! - sum)) / 0.6);
  const z = panels(
    (w) => {
      let product = phi(w) * factor(3, design[3]![3]! * w);
      for (let k = 0; k < 3; k += 1) {
        product *= panels(
          (v) => {
            let inner = phi(v);
            for (let o = k; o < 6; o += 4) {
              if (o !== 3) inner *= factor(o, design[o]![k]! * v + design[o]![3]! * w);
            }
            return inner;
          },
          -7,
          7,
          2,
        );
      }
      return product;
    },
    -7,
    7,
    2,
  );
  expect(error).toBeLessThan(1e-3);
  expect(Math.abs(ln - Math.log(z))).toBeLessThan(Math.max(3 * error, 1e-6));
});

test("flat tolerances of each row's own under two shared errors, by cubature", () => {
  const observed = [0.4, -0.3, 1.2, 0.1];
  const design = [
    [0.3, 0.1],
    [0.3, -0.2],
    [0.3, 0.4],
    [0.3, 0],
  ];
  const { ln } = found({
    observed,
    variance: observed.map(() => 0.04),
    kind: observed.map(() => EACH_FLAT),
    linear: [Z, Z],
    design,
    rows: {
      eachFlat: {
        lower: Float64Array.from(observed, () => -0.5),
        upper: Float64Array.from(observed, () => 0.5),
      },
    },
  });
  const row = (d: number) => panels((t) => phi(d - t, 0.04), -0.5, 0.5, 2);
  const z = panels(
    (a) =>
      panels(
        (b) => {
          let product = phi(a) * phi(b);
          observed.forEach((y, i) => (product *= row(y - design[i]![0]! * a - design[i]![1]! * b)));
          return product;
        },
        -7,
        7,
        4,
      ),
    -7,
    7,
    4,
  );
  expect(Math.abs(ln - Math.log(z))).toBeLessThan(1e-6);
});

test("in strong tension a bound counts that would cut off nothing were the others not there", () => {
  const observed = [0.42, 0.077, 0.13];
  const design = [
    [-0.31, 0.52],
    [-0.81, 0.66],
    [-0.57, -0.63],
  ];
  const bounds = [
    { lower: -0.011, upper: 54 },
    { lower: -2.5, upper: -2.4 },
  ] as const;
  const terms = { observed, variance: [9.1e-6, 1.8e-6, 7.7e-4] };
  const boxed = found({
    ...terms,
    linear: bounds.map((one) => flat(one.lower, one.upper)),
    design,
  });
  const outer = found({
    ...terms,
    outer: bounds.map((one) => uniformUnknown(one, { counted: true })),
    evaluate: ([a, b], _scenario, { base }) => {
      design.forEach((row, i) => (base[i] = row[0]! * a! + row[1]! * b!));
      return true;
    },
  });
  expect(boxed.ln).toBeLessThan(-1e5);
  expect(Math.abs(boxed.ln / outer.ln - 1)).toBeLessThan(1e-10);
});
