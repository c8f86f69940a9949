import * as fc from "fast-check";
import { describe, expect, test } from "vitest";
import { cyclicLeastSquares } from "./cyclic";
import { generalisedLeastSquares, type GlsGroup, type GlsRow } from "./least-squares";

/** The matrix formulas as they stand: C inverted by Gauss-Jordan, mu = 1'M y / 1'M1. */
function dense(rows: readonly GlsRow[], groups: readonly GlsGroup[]) {
  const n = rows.length;
  const c = rows.map((a, i) =>
    rows.map((b, j) => {
      let sum = i === j ? a.variance : 0;
      for (const one of a.loads) {
        for (const other of b.loads) if (one.draw === other.draw) sum += one.value * other.value;
      }
      return sum;
    }),
  );
  for (const { rows: some, covariance } of groups) {
    some.forEach((i, k) =>
      some.forEach((j, l) => {
        if (i !== j) c[i]![j]! += covariance[k * some.length + l]!;
      }),
    );
  }
  const m = inverse(c);
  const weights = m.map((row) => row.reduce((sum, value) => sum + value, 0));
  const information = weights.reduce((sum, value) => sum + value, 0);
  const shift = rows[0]!.y;
  const value =
    shift + weights.reduce((sum, w, i) => sum + w * (rows[i]!.y - shift), 0) / information;
  let chiSquare = 0;
  for (let i = 0; i < n; i += 1) {
    for (let j = 0; j < n; j += 1) {
      chiSquare += (rows[i]!.y - value) * m[i]![j]! * (rows[j]!.y - value);
    }
  }
  const loadings = new Map<string, number>();
  rows.forEach(({ loads }, i) => {
    for (const { draw, value: load } of loads) {
      loadings.set(draw, (loadings.get(draw) ?? 0) + (weights[i]! / information) * load);
    }
  });
  return { value, sd: 1 / Math.sqrt(information), chiSquare, loadings };
}

function inverse(matrix: readonly (readonly number[])[]): number[][] {
  const n = matrix.length;
  const work = matrix.map((row, i) => [...row, ...row.map((_, j) => (i === j ? 1 : 0))]);
  for (let k = 0; k < n; k += 1) {
    let pivot = k;
    for (let i = k; i < n; i += 1) {
      if (Math.abs(work[i]![k]!) > Math.abs(work[pivot]![k]!)) pivot = i;
    }
    [work[k], work[pivot]] = [work[pivot]!, work[k]!];
    const scale = work[k]![k]!;
    work[k] = work[k]!.map((value) => value / scale);
    for (let i = 0; i < n; i += 1) {
      if (i === k) continue;
      const factor = work[i]![k]!;
      work[i] = work[i]!.map((value, j) => value - factor * work[k]![j]!);
    }
  }
  return work.map((row) => row.slice(n));
}

interface RowPlan {
  y: number;
  sd: number;
  zero: number;
  night: number;
  batch: number;
}

const size = (low: number, high: number) =>
  fc.integer({ min: low * 100, max: high * 100 }).map((n) => n / 100);
const rowPlan = fc.record({
  y: size(-5, 5),
  sd: size(0.1, 2),
  zero: size(-1, 1),
  night: size(-1, 1),
  batch: fc.integer({ min: 0, max: 3 }),
});

function rowsFrom(plan: RowPlan[], centre: number): GlsRow[] {
  return plan.map(({ y, sd, zero, night, batch }) => ({
    y: centre + y,
    variance: sd * sd,
    loads: [
      { draw: "zero", batch: null, value: zero },
      { draw: `night ${batch}`, batch: `${batch}`, value: night },
    ],
  }));
}

/** The first three rows, with correlations of 0.5 between their own noises. */
function groupOf(rows: readonly GlsRow[]): GlsGroup[] {
  if (rows.length < 3) return [];
  const covariance = new Float64Array(9);
  for (let i = 0; i < 3; i += 1) {
    for (let j = 0; j < 3; j += 1) {
      const product = Math.sqrt(rows[i]!.variance * rows[j]!.variance);
      covariance[i * 3 + j] = i === j ? product : 0.5 * product;
    }
  }
  return [{ rows: [0, 1, 2], covariance }];
}

describe("generalised least squares", () => {
  test("is the matrix formulas: shared errors, batches, correlated noises; loadings are a' U", () => {
    fc.assert(
      fc.property(fc.array(rowPlan, { minLength: 1, maxLength: 9 }), fc.boolean(), (plan, tied) => {
        const rows = rowsFrom(plan, 0);
        const groups = tied ? groupOf(rows) : [];
        const found = generalisedLeastSquares(rows, groups)!;
        const expected = dense(rows, groups);
        expect(found.value).toBeCloseTo(expected.value, 9);
        expect(found.sd).toBeCloseTo(expected.sd, 9);
        expect(found.chiSquare).toBeCloseTo(expected.chiSquare, 7);
        let shared = 0;
        for (const [draw, loading] of expected.loadings) {
          expect(found.loadings.get(draw)).toBeCloseTo(loading, 9);
          shared += loading * loading;
        }
        expect(found.ownVariance).toBeCloseTo(expected.sd ** 2 - shared, 9);
      }),
      { numRuns: 150, seed: 11 },
    );
  });

  test("keeps its digits on Julian dates", () => {
    const rows = [2460000.5001, 2460000.5003, 2460000.5002].map((y) => ({
      y,
      variance: 1e-8,
      loads: [],
    }));
    const { value, chiSquare } = generalisedLeastSquares(rows)!;
    expect(Math.abs(value - 2460000.5002)).toBeLessThan(1e-9);
    expect(chiSquare).toBeCloseTo(2, 4);
  });

  test("has no answer where noises are correlated beyond what can be", () => {
    const rows = [1, 2].map((y) => ({ y, variance: 1, loads: [] }));
    const group = { rows: [0, 1], covariance: Float64Array.of(1, 1, 1, 1) };
    expect(generalisedLeastSquares(rows, [group])).toBeNull();
  });
});

describe("on a circle", () => {
  const period = 7;
  const cost = (rows: readonly GlsRow[], f: number) => {
    let sum = 0;
    for (const { y, variance } of rows) {
      const d = y - f - period * Math.round((y - f) / period);
      sum += (d * d) / variance;
    }
    return sum;
  };

  test("the value is the global minimum of the weighted wrapped squares, in [0, period)", () => {
    fc.assert(
      fc.property(fc.array(rowPlan, { minLength: 1, maxLength: 7 }), (plan) => {
        const rows = plan.map(({ y, sd }) => ({ y: 3 * y, variance: sd * sd, loads: [] }));
        const found = cyclicLeastSquares(rows, [], period)!;
        expect(found.value).toBeGreaterThanOrEqual(0);
        expect(found.value).toBeLessThan(period);
        expect(found.chiSquare).toBeCloseTo(cost(rows, found.value), 9);
        let least = Infinity;
        for (let k = 0; k < 4000; k += 1) least = Math.min(least, cost(rows, (k * period) / 4000));
        expect(found.chiSquare).toBeLessThanOrEqual(least + 1e-9);
      }),
      { numRuns: 150, seed: 12 },
    );
  });

  test("with shared errors it is the least of all ways to wrap the values", () => {
    const circle = 10;
    fc.assert(
      fc.property(fc.array(rowPlan, { minLength: 2, maxLength: 4 }), (plan) => {
        const rows = rowsFrom(plan, 0);
        const found = cyclicLeastSquares(rows, [], circle)!;
        let least = Infinity;
        for (let way = 0; way < 3 ** rows.length; way += 1) {
          const turned = rows.map((row, i) => ({
            ...row,
            y: row.y + circle * ((Math.floor(way / 3 ** i) % 3) - 1),
          }));
          const fit = generalisedLeastSquares(turned)!;
          const apart = turned.every(({ y }) => Math.abs(y - fit.value) <= circle / 2);
          if (apart) least = Math.min(least, fit.chiSquare);
        }
        expect(found.chiSquare).toBeLessThanOrEqual(least + 1e-8);
      }),
      { numRuns: 60, seed: 13 },
    );
  });

  test("values on both sides of the period's end lie together", () => {
    const rows = [359, 2, 358, 1].map((y) => ({ y, variance: 1, loads: [] }));
    const { value, chiSquare } = cyclicLeastSquares(rows, [], 360)!;
    expect(Math.min(value, 360 - value)).toBeCloseTo(0, 9);
    expect(chiSquare).toBeCloseTo(10, 9);
  });
});
