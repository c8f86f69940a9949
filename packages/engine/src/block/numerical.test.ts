import { describe, expect, test } from "vitest";
import { blockProblem, denseNormal, type BlockTerms } from "../testing/block-problems";
import { panels } from "../testing/panels";
import { blockEvidence } from "./evidence";
import { censoredFactor, fainterFactor, linearNoiseFactor } from "./factors";
import { normalUnknown, splitNormalUnknown, uniformUnknown } from "./outer-unknowns";
import { ASYMMETRIC, EACH_FLAT, FACTOR, NORMAL, type LinearUnknown } from "./problem";

// Integrals written out here, by 20-point Gauss-Legendre on many equal panels.
const PLACE = { counted: true };
const Z: LinearUnknown = { kind: "normal" };

function lnZ(terms: BlockTerms): number {
  const found = blockEvidence(blockProblem(terms));
  if (!found.ok) throw new Error(found.refusal.kind);
  return found.ln;
}

const phi = (z: number, variance = 1) =>
  Math.exp((-z * z) / 2 / variance) / Math.sqrt(2 * Math.PI * variance);

/** Phi by quadrature, so that no distribution function is shared with what is tested. */
const cdf = (z: number) => panels((x) => phi(x), -40, z, 200);

describe("one outer unknown", () => {
  test("a parameter that doesn't enter linearly", () => {
    const x = [0.5, 1, 2, 3, 5];
    const observed = [0.8, 0.55, 0.4, 0.17, 0.06];
    const found = lnZ({
      observed,
      variance: observed.map(() => 0.0025),
      outer: [normalUnknown(0.5, 0.3, PLACE)],
      evaluate: ([rate], _scenario, { base }) => {
        x.forEach((at, i) => (base[i] = Math.exp(-rate! * at)));
        return true;
      },
    });
    const expected = panels(
      (rate) => {
        let product = phi(rate - 0.5, 0.09);
        x.forEach((at, i) => (product *= phi(observed[i]! - Math.exp(-rate * at), 0.0025)));
        return product;
      },
      -2.5,
      3.5,
    );
    expect(Math.abs(found - Math.log(expected))).toBeLessThan(1e-9);
  });

  test.each([0.1, 0.01])("a second peak five prior sds out, of weight 4e-6, noise %d", (sd) => {
    const found = lnZ({
      observed: [0],
      variance: [sd * sd],
      outer: [normalUnknown(0, 1, PLACE)],
      evaluate: ([value], _scenario, { base }) => {
        base.fill(value! * (value! - 5));
        return true;
      },
    });
    const density = (z: number) => phi(z) * phi(z * (z - 5), sd * sd);
    const expected = panels(density, -1, 1, 2000) + panels(density, 4, 6, 2000);
    expect(Math.abs(found - Math.log(expected))).toBeLessThan(1e-9);
  });

  test("a narrow posterior ten prior sds out", () => {
    const found = lnZ({
      observed: [10, 10.00001],
      variance: [1e-12, 1e-12],
      outer: [normalUnknown(0, 1, PLACE)],
      evaluate: ([value], _scenario, { base }) => {
        base.fill(value!);
        return true;
      },
    });
    // Mean and difference are independent: N(0, 1 + s^2 / 2) and N(0, 2 s^2).
    const expected = Math.log(phi(10.000005, 1 + 5e-13)) + Math.log(phi(10.00001 - 10, 2e-12));
    expect(Math.abs(found - expected)).toBeLessThan(1e-9);
  });

  test("a split-normal offset", () => {
    const observed = [0.7, 0.5, 1.1];
    const [plus, minus] = [0.4, 1.5];
    const found = lnZ({
      observed,
      variance: [0.04, 0.09, 0.25],
      outer: [splitNormalUnknown({ plus, minus }, PLACE)],
      evaluate: ([offset], _scenario, { base }) => {
        base.fill(offset!);
        return true;
      },
    });
    const at = (d: number) => {
      const side = d < 0 ? minus : plus;
      const prior = (2 / (plus + minus)) * phi(d / side);
      return prior * phi(0.7 - d, 0.04) * phi(0.5 - d, 0.09) * phi(1.1 - d, 0.25);
    };
    const expected = panels(at, -6, 0) + panels(at, 0, 6);
    expect(Math.abs(found - Math.log(expected))).toBeLessThan(1e-9);
  });
});

describe("rows that aren't Gaussian", () => {
  test("censored readings and a value with an offset in common", () => {
    const limits = [0.3, -0.2];
    const found = lnZ({
      observed: [0.5, 0, 0],
      variance: [0.09, 0, 0],
      kind: [NORMAL, FACTOR, FACTOR],
      linear: [Z],
      design: [[0.8], [0.8], [0.8]],
      rows: {
        factors: [
          null,
          censoredFactor({ limit: limits[0]!, sd: 0.2, side: 1, extra: 0.05 }),
          censoredFactor({ limit: limits[1]!, sd: 0.1, side: -1, extra: 0 }),
        ],
      },
    });
    const s = Math.sqrt(0.04 + 0.05);
    const expected = panels(
      (z) =>
        phi(z) * phi(0.5 - 0.8 * z, 0.09) * cdf((0.3 - 0.8 * z) / s) * cdf((0.8 * z + 0.2) / 0.1),
      -9,
      9,
      40,
    );
    expect(Math.abs(found - Math.log(expected))).toBeLessThan(1e-9);
  });

  test("noise that is normal in flux on a row in log10, seen through scatter, values below zero too", () => {
    for (const [value, extra] of [
      [3, 0.02],
      [-0.5, 0.02],
      [0.2, 0],
      [40, 0.3],
    ] as const) {
      const found = lnZ({
        observed: [0],
        variance: [0],
        kind: [FACTOR],
        linear: [Z],
        design: [[0.5]],
        rows: { factors: [linearNoiseFactor({ value, sd: 1, extra, centre: 0.25 })] },
      });
      // An offset of sd 0.5 and the scatter are one normal.
      const sd = Math.sqrt(0.25 + extra);
      const expected = panels(
        (m) => (phi(m / sd) / sd) * phi(value - 10 ** (m + 0.25)),
        -12 * sd,
        12 * sd,
      );
      expect(Math.abs(found - Math.log(expected))).toBeLessThan(1e-9);
    }
  });

  test("a magnitude not reached", () => {
    const factor = fainterFactor({ limit: 20, sigmas: 3, extra: 0.1 });
    const found = lnZ({
      observed: [0],
      variance: [0],
      kind: [FACTOR],
      linear: [Z],
      design: [[0.6]],
      rows: { factors: [factor] },
      evaluate: (_outer, _scenario, { base }) => {
        base.fill(19.2);
        return true;
      },
    });
    const sd = Math.sqrt(0.46);
    const expected = panels(
      (m) => (phi((m - 19.2) / sd) / sd) * phi(3 * 10 ** (-0.4 * (m - 20))),
      19.2 - 10 * sd,
      19.2 + 10 * sd,
    );
    expect(Math.abs(found - Math.log(expected))).toBeLessThan(1e-9);
  });

  test("a flat tolerance of each row's own beside a shared error", () => {
    const observed = [0.4, -0.3, 1.2];
    const found = lnZ({
      observed,
      variance: [0.04, 0.01, 0.09],
      kind: [EACH_FLAT, EACH_FLAT, EACH_FLAT],
      linear: [Z],
      design: [[0.3], [0.3], [0.3]],
      rows: {
        eachFlat: {
          lower: Float64Array.of(-0.5, -0.5, -0.5),
          upper: Float64Array.of(0.5, 0.5, 0.5),
        },
      },
    });
    const row = (y: number, sd: number, z: number) =>
      cdf((y - 0.3 * z + 0.5) / sd) - cdf((y - 0.3 * z - 0.5) / sd);
    const expected = panels(
      (z) => phi(z) * row(0.4, 0.2, z) * row(-0.3, 0.1, z) * row(1.2, 0.3, z),
      -9,
      9,
      40,
    );
    expect(Math.abs(found - Math.log(expected))).toBeLessThan(1e-9);
  });
});

describe("asymmetric readings", () => {
  const plus = [0.5, 0.2, 0.3];
  const minus = [0.2, 0.4, 0.3];
  const observed = [1.9, 2.4, 2.1];
  const likelihood = (i: number, mu: number) => {
    const d = mu - observed[i]!;
    const [p, m] = [plus[i]!, minus[i]!];
    const least = Math.min(p, m) ** 2;
    const most = Math.max(p, m) ** 2;
    const v = Math.min(Math.max(p * m + (p - m) * d, least), most);
    return (Math.exp((-d * d) / 2 / v) * 2) / Math.sqrt(2 * Math.PI) / (p + m);
  };
  const rows = { asymmetric: { plus: Float64Array.from(plus), minus: Float64Array.from(minus) } };
  const kind = observed.map(() => ASYMMETRIC);
  const all = (mu: number) => likelihood(0, mu) * likelihood(1, mu) * likelihood(2, mu);

  test("against an exact prediction they are taken as they are", () => {
    const found = lnZ({
      observed,
      variance: [0, 0, 0],
      kind,
      rows,
      evaluate: (_outer, _scenario, { base }) => {
        base.fill(2.05);
        return true;
      },
    });
    expect(Math.abs(found - Math.log(all(2.05)))).toBeLessThan(1e-12);
  });

  test("with a flat level, and with one that is the sum of two normals, by quadrature", () => {
    const flat = lnZ({
      observed,
      variance: [0, 0, 0],
      kind,
      rows,
      linear: [{ kind: "flat", lower: -3, upper: 7, width: 10 }],
      design: [[1], [1], [1]],
    });
    expect(Math.abs(flat - Math.log(panels(all, -3, 7, 2000) / 10))).toBeLessThan(1e-9);
    const normal = lnZ({
      observed,
      variance: [0, 0, 0],
      kind,
      rows,
      linear: [Z, Z],
      design: observed.map(() => [0.3, 0.4]),
      evaluate: (_outer, _scenario, { base }) => {
        base.fill(2);
        return true;
      },
    });
    const expected = panels((mu) => phi(mu - 2, 0.25) * all(mu), -3, 7, 2000);
    expect(Math.abs(normal - Math.log(expected))).toBeLessThan(1e-9);
  });

  test("with more than one unknown, normal with the variance at its own best fit", () => {
    const load = [0.5, -0.2, 0.1];
    const found = lnZ({
      observed,
      variance: [0, 0.01, 0.02],
      kind,
      rows,
      linear: [Z, Z],
      design: load.map((value) => [0.4, value]),
      evaluate: (_outer, _scenario, { base }) => {
        base.fill(2);
        return true;
      },
    });
    let v = plus.map((p, i) => p * minus[i]!);
    let extra = [0, 0.01, 0.02];
    const w = load.map((value) => [0.4, value]);
    const covariance = () =>
      v.map((_, i) =>
        v.map(
          (__, j) =>
            w[i]![0]! * w[j]![0]! + w[i]![1]! * w[j]![1]! + (i === j ? v[i]! + extra[i]! : 0),
        ),
      );
    const r = observed.map((y) => y - 2);
    for (let round = 0; round < 200; round += 1) {
      const weights = solveDense(covariance(), r);
      // All but the reading's own noise, V C^-1 r.
      const mu = r.map((value, i) => value - v[i]! * weights[i]!);
      v = plus.map((p, i) => {
        const m = minus[i]!;
        const d = mu[i]! - r[i]!;
        return Math.min(Math.max(p * m + (p - m) * d, Math.min(p, m) ** 2), Math.max(p, m) ** 2);
      });
    }
    let expected = denseNormal(r, covariance()).ln;
    v.forEach((one, i) => (expected += Math.log((Math.sqrt(one) * 2) / (plus[i]! + minus[i]!))));
    extra = [];
    expect(Math.abs(found - expected)).toBeLessThan(1e-10);
  });
});

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

test("scenarios add up by weight, flat parameters by their boxes", () => {
  const found = lnZ({
    observed: [0.3, 0.9],
    variance: [0.04, 0.25],
    scenarios: [0.2, 0.8],
    outer: [uniformUnknown({ lower: -1, upper: 2 }, PLACE)],
    evaluate: ([value], scenario, { base }) => {
      base[0] = value! * value! + scenario;
      base[1] = value!;
      return true;
    },
  });
  const z = (scenario: number) =>
    panels((v) => (phi(0.3 - v * v - scenario, 0.04) * phi(0.9 - v, 0.25)) / 3, -1, 2);
  expect(Math.abs(found - Math.log(0.2 * z(0) + 0.8 * z(1)))).toBeLessThan(1e-9);
});
