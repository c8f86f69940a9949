import { expect, test } from "vitest";
import { findRoot } from "./find-root";
import { minimiseScalar } from "./minimise-scalar";
import { NumericsError } from "./numerics-error";

test("roots are found to the last digits", () => {
  const eps = 4 * 2 ** -52;
  // Closed forms; the omega constant w e^w = 1 is OEIS A030178.
  expect(Math.abs(findRoot((x) => x * x - 2, 0, 2) / Math.SQRT2 - 1)).toBeLessThan(eps);
  expect(Math.abs(findRoot(Math.sin, 3, 4) / Math.PI - 1)).toBeLessThan(eps);
  const omega = 0.5671432904097838;
  expect(Math.abs(findRoot((w) => w * Math.exp(w) - 1, -1, 10) / omega - 1)).toBeLessThan(eps);
  expect(findRoot((x) => (x - 1e-200) * 1e200, -1, 3)).toBeCloseTo(1e-200, 14);
});

test("a root is found where f is flat, steep or jumps", () => {
  expect(Math.abs(findRoot((x) => (x - 0.3) ** 9, -4, 1) - 0.3)).toBeLessThan(1e-15);
  expect(Math.abs(findRoot((x) => Math.cbrt(x - 0.3), -4, 1) - 0.3)).toBeLessThan(1e-15);
  expect(Math.abs(findRoot((x) => (x < 0.3 ? -1 : 2), -4, 1) - 0.3)).toBeLessThan(1e-15);
  expect(findRoot((x) => x, 0, 5)).toBe(0);
  expect(findRoot((x) => x - 5, 0, 5)).toBe(5);
});

test("a tolerance saves evaluations and is kept", () => {
  let calls = 0;
  const root = findRoot(
    (x) => {
      calls += 1;
      return Math.exp(x) - 5;
    },
    0,
    10,
    1e-3,
  );
  expect(Math.abs(root - Math.log(5))).toBeLessThan(1e-3);
  expect(calls).toBeLessThan(20);
});

test("no change of sign is refused", () => {
  expect(() => findRoot((x) => x * x + 1, -1, 1)).toThrow(NumericsError);
  expect(() => findRoot(() => NaN, -1, 1)).toThrow(NumericsError);
});

test("minima are found as well as values of f tell them apart", () => {
  // x ln x is least at 1 / e; cosh(x - 2) at 2.
  const entropy = minimiseScalar((x) => x * Math.log(x), 0, 1);
  expect(Math.abs(entropy.x - 1 / Math.E)).toBeLessThan(2e-8);
  expect(Math.abs(entropy.value + 1 / Math.E)).toBeLessThan(1e-15);
  const chain = minimiseScalar((x) => Math.cosh(x - 2), -30, 40);
  expect(Math.abs(chain.x - 2)).toBeLessThan(6e-8);
  expect(chain.value).toBe(1);
});

test("a minimum at an end is come up to, and values that are no number are walked away from", () => {
  expect(minimiseScalar((x) => x, 3, 5).x).toBeCloseTo(3, 6);
  expect(minimiseScalar((x) => -x, 3, 5).x).toBeCloseTo(5, 6);
  const guarded = minimiseScalar((x) => (x > 2 ? NaN : (x - 0.5) ** 2), 0, 4);
  expect(guarded.x).toBeCloseTo(0.5, 6);
});
