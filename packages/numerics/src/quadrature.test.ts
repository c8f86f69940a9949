import { describe, expect, test } from "vitest";
import { gaussKronrod } from "./gauss-kronrod";
import { gaussLegendre } from "./gauss-legendre";
import { logConcaveIntegral } from "./log-concave-integral";
import { legendreRule } from "./legendre-rule";
import { LN_SQRT_2PI } from "./normal";

describe("rules are exact where their theory says so", () => {
  // Degrees of exactness: Davis & Rabinowitz, Methods of Numerical Integration, 2.7.
  test.each([0, 2, 8, 18, 30])("for x^%d", (degree) => {
    const exact = 2 / (degree + 1);
    expect(gaussLegendre((x) => x ** degree, -1, 1)).toBeCloseTo(exact, 14);
    const kronrod = gaussKronrod((x) => x ** degree, -1, 1, { maximum: 1 });
    expect(kronrod.value).toBeCloseTo(exact, 14);
    if (degree < 20) expect(kronrod.error).toBeLessThan(1e-14);
  });
});

test("the adaptive rule resolves a peak of 1e-6 of the interval", () => {
  // The integral of a / (pi (a^2 + (x - c)^2)) is a difference of arctangents.
  const a = 1e-6;
  const f = (x: number) => a / (Math.PI * (a * a + (x - 0.3) ** 2));
  const exact = (Math.atan(0.7 / a) + Math.atan(0.3 / a)) / Math.PI;
  const { value, error } = gaussKronrod(f, 0, 1);
  expect(Math.abs(value - exact)).toBeLessThan(1e-10);
  expect(error).toBeLessThan(1e-10);
});

describe("log-concave integrals", () => {
  test.each([
    [0, 1],
    [1e3, 1e-3],
    [-3e-6, 1e-12],
    [5, 1e9],
  ])("of a Gaussian about %d of width %d, from a far start", (mean, sd) => {
    const g = (x: number) => -(((x - mean) / sd) ** 2) / 2;
    const range = { lower: -Infinity, upper: Infinity, start: mean + 40 * sd, scale: sd };
    expect(logConcaveIntegral(g, range).ln).toBeCloseTo(LN_SQRT_2PI + Math.log(sd), 9);
  });

  test("of an exponential piled up at an end", () => {
    const range = { lower: 0, upper: 1, start: 0.7, scale: 0.25 };
    const ln = logConcaveIntegral((x) => -1e7 * x, range).ln;
    expect(ln).toBeCloseTo(-Math.log(1e7), 9);
  });
});

describe("the n-point Gauss-Legendre rule", () => {
  // Abramowitz & Stegun 25.4.29: exact up to degree 2n - 1, and not one degree further.
  test.each([2, 7, 12, 40])("of %d points has the degree 2n - 1", (n) => {
    const { nodes, weights } = legendreRule(n);
    const integral = (degree: number) =>
      nodes.reduce((sum, x, i) => sum + weights[i]! * x ** degree, 0);
    for (const degree of [0, 2, 2 * n - 2]) {
      expect(Math.abs(integral(degree) * (degree + 1) - 2)).toBeLessThan(1e-13 * (degree + 1));
    }
    if (n < 12) expect(Math.abs(integral(2 * n) - 2 / (2 * n + 1))).toBeGreaterThan(1e-7);
    expect(nodes.every((x, i) => i === 0 || x > nodes[i - 1]!)).toBe(true);
  });
});
