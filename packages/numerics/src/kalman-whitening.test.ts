import { expect, test } from "vitest";
import fixture from "./fixtures/kalman-whitening.json";
import { whitenSmooth } from "./kalman-whitening";
import { NumericsError } from "./numerics-error";
import { sobolPoints } from "./sobol";
import { choleskyFactor, logDeterminant, whiten } from "./symmetric-cholesky";

interface Case {
  x: Float64Array;
  variance: Float64Array;
  sd: number;
  length: number;
  columns: [Float64Array, Float64Array];
}

const CASES = 200;
const ROWS = 12;

/** Unordered x of mean spacing 1, some twice; lengths of 1e-6 to 1e6, sd / noise of 1e-2 to 1e2. */
function cases(): Case[] {
  const points = sobolPoints(4 * ROWS, CASES, 1);
  return Array.from({ length: CASES }, (_, c) => {
    const u = points.subarray(c * 4 * ROWS, (c + 1) * 4 * ROWS);
    const x = u.subarray(0, ROWS).map((value) => value * ROWS);
    if (c % 3 === 0) x[5] = x[2]!;
    if (c % 7 === 0) x.fill(3, 0, 4);
    return {
      x,
      variance: u.subarray(ROWS, 2 * ROWS).map((value) => 0.01 + value),
      sd: 10 ** (((c * 7) % 40) / 10 - 2),
      length: 10 ** ((12 * c) / (CASES - 1) - 6),
      columns: [
        u.subarray(2 * ROWS, 3 * ROWS).map((value) => value * 4 - 1.9),
        u.subarray(3 * ROWS).slice(),
      ],
    };
  });
}

function dot(a: Float64Array, b: Float64Array): number {
  return a.reduce((sum, value, i) => sum + value * b[i]!, 0);
}

test("the filter's forms and determinant are the dense matrix's, for 200 cases", () => {
  for (const { x, variance, sd, length, columns } of cases()) {
    const dense = Array.from({ length: ROWS * ROWS }, (_, k) => {
      const [i, j] = [Math.floor(k / ROWS), k % ROWS];
      const smooth = sd * sd * Math.exp(-Math.abs(x[i]! - x[j]!) / length);
      return smooth + (i === j ? variance[i]! : 0);
    });
    const result = choleskyFactor(dense, ROWS);
    if (!result.ok) throw new Error("the dense matrix is singular");
    const expected = columns.map((column) => column.slice());
    expected.forEach((column) => whiten(result.factor, column));
    const found = whitenSmooth({ x, variance, sd, length, columns });

    // The dense matrix's own rounding: eps times its condition, at most (12 sd^2 + 1) / 0.01.
    const allowed = 2 ** -52 * Math.max(1e4, 1e4 * sd * sd);
    const label = `sd ${sd}, length ${length}`;
    expect(Math.abs(found - logDeterminant(result.factor)), label).toBeLessThan(allowed);
    for (const [a, b] of [
      [0, 0],
      [0, 1],
      [1, 1],
    ] as const) {
      const form = dot(expected[a]!, expected[b]!);
      const size = Math.sqrt(dot(expected[a]!, expected[a]!) * dot(expected[b]!, expected[b]!));
      expect(Math.abs(dot(columns[a], columns[b]) - form) / size, label).toBeLessThan(allowed);
    }
  }
});

test.each(fixture.cases)("sd $sd over length $length gives mpmath's forms", (expected) => {
  const { x, variance } = fixture;
  const [a, b] = [Float64Array.from(fixture.a), Float64Array.from(fixture.b)];
  const { sd, length, logDeterminant: determinant, aa, ab, bb } = expected;
  const found = whitenSmooth({ x, variance, sd, length, columns: [a, b] });
  // N eps = 2e-15, five times over. With a large sd column a nearly vanishes: its whitened entries
  // are differences, right to eps of its values over the noise's sd, 1 / sqrt 0.125 at most.
  const size = 3 * Math.sqrt(bb);
  expect(Math.abs(found - determinant)).toBeLessThan(1e-14 * Math.max(1, Math.abs(determinant)));
  expect(Math.abs(dot(a, a) / aa - 1)).toBeLessThan(1e-14);
  expect(Math.abs(dot(a, b) - ab)).toBeLessThan(1e-14 * size);
  expect(Math.abs(dot(b, b) / bb - 1)).toBeLessThan(1e-14);
});

test("the rows' order makes no difference, and rows stay where they are", () => {
  const x = [0, 1, 2.5, 4];
  const variance = [1, 2, 0.5, 1];
  const column = Float64Array.of(1, -1, 3, 2);
  const turned = Float64Array.of(2, 3, -1, 1);
  const noise = { sd: 1.5, length: 2 };
  const forwards = whitenSmooth({ x, variance, ...noise, columns: [column] });
  const reversed = { x: x.toReversed(), variance: variance.toReversed(), ...noise };
  expect(whitenSmooth({ ...reversed, columns: [turned] })).toBe(forwards);
  expect(turned.toReversed()).toEqual(column);
});

test("without a smooth part each row is divided by its own sd", () => {
  const column = Float64Array.of(2, 3, -8);
  const variance = [4, 9, 16];
  const found = whitenSmooth({ x: [3, 1, 2], variance, sd: 0, length: 1, columns: [column] });
  expect([...column]).toEqual([1, 1, -2]);
  expect(found).toBeCloseTo(Math.log(4 * 9 * 16), 14);
});

test("an endless length is one common offset: Woodbury by hand", () => {
  // C = I + s^2 11': 1' C^-1 1 = n / (1 + n s^2), |C| = 1 + n s^2.
  const ones = new Float64Array(5).fill(1);
  const x = [0, 1, 2, 3, 4];
  const variance = new Float64Array(5).fill(1);
  const found = whitenSmooth({ x, variance, sd: 3, length: Infinity, columns: [ones] });
  expect(dot(ones, ones)).toBeCloseTo(5 / 46, 14);
  expect(found).toBeCloseTo(Math.log(46), 13);
});

test("what is no noise is refused", () => {
  const column = [Float64Array.of(1)];
  const good = { x: [0], variance: [1], sd: 1, length: 1, columns: column };
  expect(() => whitenSmooth({ ...good, length: 0 })).toThrow(NumericsError);
  expect(() => whitenSmooth({ ...good, sd: -1 })).toThrow(NumericsError);
  expect(() => whitenSmooth({ ...good, variance: [0] })).toThrow(NumericsError);
  expect(() => whitenSmooth({ ...good, x: [NaN] })).toThrow(NumericsError);
});
