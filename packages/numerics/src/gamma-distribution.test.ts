import { describe, expect, test } from "vitest";
import fixture from "./fixtures/gamma-tails.json";
import {
  gammaCdf,
  gammaFromMoments,
  gammaQuantile,
  gammaUpperTail,
  logGammaPdf,
} from "./gamma-distribution";
import { NumericsError } from "./numerics-error";

// mpmath, see the fixture; 1e-12 relative is the target of the engine's distribution functions.
const ACCURACY = 1e-12;
const rows = fixture.rows.map(([a, x, p, q, kernel]) => ({
  a: a!,
  x: x!,
  p: p!,
  q: q!,
  kernel: kernel!,
}));

describe("the gamma distribution", () => {
  test("has mpmath's tails, down to 1e-300 and for shapes of 1e-6 to 3e6", () => {
    for (const { a, x, p, q } of rows) {
      const unit = { shape: a, scale: 1 };
      const label = `shape ${a} at ${x}`;
      expect(Math.abs(gammaCdf(x, unit) / p - 1), label).toBeLessThan(ACCURACY);
      expect(Math.abs(gammaUpperTail(x, unit) / q - 1), label).toBeLessThan(ACCURACY);
      // A scale that is a power of two changes no digit.
      expect(gammaCdf(x * 8, { shape: a, scale: 8 })).toBe(gammaCdf(x, unit));
    }
    expect(rows.length).toBeGreaterThan(250);
  });

  test("has mpmath's density", () => {
    for (const { a, x, kernel } of rows) {
      const expected = kernel + Math.log(a / x);
      const size = Math.max(1, Math.abs(kernel), Math.abs(expected));
      const found = logGammaPdf(x, { shape: a, scale: 1 });
      expect(Math.abs(found - expected), `shape ${a} at ${x}`).toBeLessThan(1e-14 * size);
      const scaled = logGammaPdf(x * 8, { shape: a, scale: 8 });
      expect(Math.abs(scaled - found + Math.log(8))).toBeLessThan(1e-14 * size);
    }
  });

  test("has the quantiles that its tails ask for", () => {
    for (const { a, x, p, q } of rows) {
      // d ln x for a last digit of p: what the number p itself doesn't tell.
      const density = Math.exp(logGammaPdf(x, { shape: a, scale: 1 })) * x;
      const blur = ((p < q ? p : 1) * 2 ** -52) / density;
      if (blur > 1e-3) continue;
      const found = gammaQuantile(p, { shape: a, scale: 3 }) / 3;
      expect(Math.abs(found / x - 1), `shape ${a} at ${x}`).toBeLessThan(ACCURACY + 10 * blur);
    }
  });

  test("takes its shape and scale from a mean and sd", () => {
    const { shape, scale } = gammaFromMoments(12, 3);
    expect(shape).toBe(16);
    expect(scale).toBe(0.75);
    expect(() => gammaFromMoments(0, 1)).toThrow(NumericsError);
    expect(() => gammaFromMoments(1, 0)).toThrow(NumericsError);
    expect(() => gammaFromMoments(1, Infinity)).toThrow(NumericsError);
  });

  test("ends where its range ends", () => {
    const one = { shape: 1, scale: 2 };
    expect(gammaCdf(0, one)).toBe(0);
    expect(gammaCdf(Infinity, one)).toBe(1);
    expect(gammaUpperTail(-1, one)).toBe(1);
    expect(gammaUpperTail(Infinity, one)).toBe(0);
    expect(logGammaPdf(0, one)).toBe(-Math.LN2);
    expect(logGammaPdf(0, { shape: 2, scale: 1 })).toBe(-Infinity);
    expect(logGammaPdf(0, { shape: 0.5, scale: 1 })).toBe(Infinity);
    expect(logGammaPdf(-1, one)).toBe(-Infinity);
    expect(gammaQuantile(0, one)).toBe(0);
    expect(gammaQuantile(1, one)).toBe(Infinity);
    expect(gammaQuantile(1e-5, { shape: 1e-3, scale: 1 })).toBe(0);
    expect(() => gammaQuantile(1.01, one)).toThrow(NumericsError);
  });
});
