import { describe, expect, test } from "vitest";
import { sobolPoints } from "./sobol";
import {
  choleskyFactor,
  logDeterminant,
  solveSymmetric,
  whiten,
  type CholeskyFactor,
} from "./symmetric-cholesky";

function factored(matrix: number[], size: number): CholeskyFactor {
  const result = choleskyFactor(matrix, size);
  if (!result.ok) throw new Error(`not positive definite at ${result.at}`);
  return result.factor;
}

describe("the Cholesky factor of a symmetric matrix", () => {
  // Golub & Van Loan's kind of textbook matrix: L = [[2, 0, 0], [6, 1, 0], [-8, 5, 3]] by hand.
  const matrix = [4, 12, -16, 12, 37, -43, -16, -43, 98];

  test("is the one found by hand", () => {
    const { lower } = factored(matrix, 3);
    [2, 0, 0, 6, 1, 0, -8, 5, 3].forEach((value, i) => expect(lower[i]).toBeCloseTo(value, 12));
    expect(logDeterminant(factored(matrix, 3))).toBeCloseTo(Math.log(36), 13);
  });

  test("solves, and whitens to the same quadratic form", () => {
    const factor = factored(matrix, 3);
    const x = Float64Array.of(4 - 24 - 48, 12 - 74 - 129, -16 + 86 + 294);
    const whitened = x.slice();
    whiten(factor, whitened);
    solveSymmetric(factor, x);
    [1, -2, 3].forEach((value, i) => expect(x[i]).toBeCloseTo(value, 11));
    const form = whitened.reduce((sum, value) => sum + value * value, 0);
    expect(form / (1 * -68 + -2 * -191 + 3 * 364)).toBeCloseTo(1, 13);
  });

  test("doesn't depend on the rows' units, be they 1e-150 and 1e150", () => {
    const scale = [1e-150, 1, 1e150];
    const scaled = matrix.map((value, i) => value * scale[Math.floor(i / 3)]! * scale[i % 3]!);
    const { lower } = factored(scaled, 3);
    const plain = factored(matrix, 3).lower;
    for (let i = 0; i < 9; i += 1) {
      expect(lower[i]! / scale[Math.floor(i / 3)]!).toBeCloseTo(plain[i]!, 12);
    }
  });

  test("multiplies back to the matrix", () => {
    const points = sobolPoints(36, 20, 1);
    for (let c = 0; c < 20; c += 1) {
      // A random 6 x 6 matrix times its transpose, on a small ridge.
      const a = points.subarray(c * 36, c * 36 + 36).map((u) => u - 0.5);
      const product = Array.from({ length: 36 }, (_, i) => {
        let sum = i % 7 === 0 ? 1e-4 : 0;
        for (let k = 0; k < 6; k += 1) sum += a[Math.floor(i / 6) * 6 + k]! * a[(i % 6) * 6 + k]!;
        return sum;
      });
      const { lower } = factored(product, 6);
      for (let i = 0; i < 6; i += 1) {
        for (let j = 0; j < 6; j += 1) {
          let sum = 0;
          for (let k = 0; k < 6; k += 1) sum += lower[i * 6 + k]! * lower[j * 6 + k]!;
          expect(Math.abs(sum - product[i * 6 + j]!)).toBeLessThan(
            6 * 2 ** -52 * Math.sqrt(product[i * 7]! * product[j * 7]!),
          );
        }
      }
    }
  });
});

test("a matrix that isn't positive definite names the row that shows it", () => {
  expect(choleskyFactor([1, 1, 1, 1], 2)).toEqual({ ok: false, at: 1 });
  expect(choleskyFactor([1, 0, 0, 0, -1, 0, 0, 0, 1], 3)).toEqual({ ok: false, at: 1 });
  expect(choleskyFactor([1, 0, 0, NaN], 2)).toEqual({ ok: false, at: 1 });
  expect(choleskyFactor([1, NaN, NaN, 1], 2)).toEqual({ ok: false, at: 1 });
  // Three that can't all be anticorrelated by 0.6: 1 - 3 * 0.36 - 2 * 0.216 < 0.
  const r = -0.6;
  expect(choleskyFactor([1, r, r, r, 1, r, r, r, 1], 3)).toEqual({ ok: false, at: 2 });
  // A copy of a row in other units, and a sum of two rows.
  expect(choleskyFactor([4, 0.3, 0.3, 0.0225], 2)).toEqual({ ok: false, at: 1 });
  expect(choleskyFactor([1, 0, 1, 0, 1, 1, 1, 1, 2], 3)).toEqual({ ok: false, at: 2 });
  expect(choleskyFactor([1, 0.999999999999, 0.999999999999, 1], 2).ok).toBe(true);
});
