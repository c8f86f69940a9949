import { describe, expect, test } from "vitest";
import fixture from "./fixtures/log-normal-interval.json";
import quantiles from "./fixtures/normal-quantile.json";
import { NumericsError } from "./numerics-error";
import {
  logNormalCdf,
  logNormalInterval,
  logNormalPdf,
  normalCdf,
  normalInterval,
  normalQuantile,
  normalUpperQuantile,
  truncatedNormalQuantile,
} from "./normal";

describe("log of the normal's mass between two bounds", () => {
  // mpmath, see the fixture; 1e-12 is the target of the engine's distribution functions.
  test.each(fixture.values)("between $lower and $upper is mpmath's", ({ lower, upper, ln }) => {
    const expected = Number(ln);
    expect(Math.abs(logNormalInterval(lower, upper) / expected - 1)).toBeLessThan(1e-12);
    expect(logNormalInterval(-upper, -lower)).toBeCloseTo(expected, 10);
  });

  test("covers the whole line with certainty, and refuses an empty interval", () => {
    expect(logNormalInterval(-Infinity, Infinity)).toBe(0);
    expect(logNormalInterval(-Infinity, -40)).toBeCloseTo(logNormalCdf(-40), 9);
    expect(normalInterval(3, 3)).toBe(0);
    expect(() => logNormalInterval(1, 1)).toThrow(NumericsError);
  });
});

test("a share of a cut normal's mass lies below its quantile, also 45 sigma out", () => {
  for (const [lower, upper] of [
    [-1, 2],
    [-50, 50],
    [4.5, 6],
    [20, 21],
    [45, Infinity],
    [-46, -45],
    [-Infinity, -8],
  ] as const) {
    for (const p of [1e-6, 0.1, 0.5, 0.93, 1 - 1e-6]) {
      const u = truncatedNormalQuantile(lower, upper, p);
      const share = Math.exp(logNormalInterval(lower, u) - logNormalInterval(lower, upper));
      expect(Math.abs(share - p)).toBeLessThan(1e-9);
    }
  }
});

test("the distribution function and its log agree on both sides of 0", () => {
  for (const z of [-30, -5, -1, -1e-9, 0, 1e-9, 1, 5, 8]) {
    const cdf = normalCdf(z);
    expect(Math.abs(Math.exp(logNormalCdf(z)) / cdf - 1)).toBeLessThan(1e-12);
  }
});

test.each(quantiles.rows)("the normal exceeded with probability %d is mpmath's", (q, z) => {
  // What q's own last digit is worth, eps q / phi(z), comes on top near 0.
  const allowed = 1e-14 * Math.abs(z!) + (2 ** -52 * q!) / Math.exp(logNormalPdf(z!));
  expect(Math.abs(normalUpperQuantile(q!) - z!)).toBeLessThanOrEqual(allowed);
  expect(Math.abs(normalQuantile(q!) + z!)).toBeLessThanOrEqual(allowed);
});

test("a normal's quantiles end at infinity and refuse what is no probability", () => {
  expect(normalQuantile(0)).toBe(-Infinity);
  expect(normalUpperQuantile(0)).toBe(Infinity);
  expect(normalQuantile(1)).toBe(Infinity);
  expect(() => normalQuantile(-1e-300)).toThrow(NumericsError);
  expect(() => normalUpperQuantile(NaN)).toThrow(NumericsError);
});

test("a share of a cut normal's mass is found where the share itself is 1e-20 of it", () => {
  const u = truncatedNormalQuantile(-50, 50, 1e-20);
  expect(Math.abs(normalCdf(u) / 1e-20 - 1)).toBeLessThan(1e-12);
});
