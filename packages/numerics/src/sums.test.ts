import { expect, test } from "vitest";
import { binomialUpperTail } from "./binomial";
import { chiSquareUpperTail } from "./chi-square";
import binomialTails from "./fixtures/binomial-tails.json";
import { logSumExp } from "./log-sum-exp";
import { NumericsError } from "./numerics-error";

test("sums of exponentials far below underflow keep their digits", () => {
  expect(logSumExp([-1000, -1000])).toBeCloseTo(-1000 + Math.LN2, 12);
  expect(logSumExp([])).toBe(-Infinity);
  expect(logSumExp([-Infinity, 3])).toBe(3);
});

test("binomial tails are the textbook's", () => {
  // By hand: P(X >= 1) = 1 - 0.99^3; P(X >= 2 of 2) = 0.01^2; ten coins, 8 or more: 56 / 1024.
  expect(binomialUpperTail(1, 3, 0.01)).toBeCloseTo(1 - 0.99 ** 3, 15);
  expect(binomialUpperTail(2, 2, 0.01)).toBeCloseTo(1e-4, 18);
  expect(binomialUpperTail(8, 10, 0.5)).toBeCloseTo(56 / 1024, 15);
  expect(binomialUpperTail(0, 5, 0.3)).toBe(1);
});

test.each(binomialTails.rows)("P(X >= %d) of %d at %d is mpmath's", (k, n, p, tail) => {
  // 1e-12: the target of the engine's distribution functions.
  expect(Math.abs(binomialUpperTail(k!, n!, p!) / tail! - 1)).toBeLessThan(1e-12);
});

test("a chi-square tail refuses what is out of its domain", () => {
  expect(chiSquareUpperTail(0, 3)).toBe(1);
  expect(chiSquareUpperTail(Infinity, 3)).toBe(0);
  expect(() => chiSquareUpperTail(-1, 3)).toThrow(NumericsError);
  expect(() => chiSquareUpperTail(1, 0)).toThrow(NumericsError);
});
