import { expect, test } from "vitest";
import fixture from "./fixtures/gamma-tails.json";
import { NumericsError } from "./numerics-error";
import { logPoissonPmf, poissonCdf, poissonUpperTail } from "./poisson-distribution";

test("Poisson tails are mpmath's incomplete gamma functions", () => {
  let checked = 0;
  for (const [a, mean, p, q, kernel] of fixture.rows) {
    if (!Number.isInteger(a)) continue;
    const n = a!;
    expect(Math.abs(poissonUpperTail(n, mean!) / p! - 1)).toBeLessThan(1e-12);
    expect(Math.abs(poissonCdf(n - 1, mean!) / q! - 1)).toBeLessThan(1e-12);
    expect(Math.abs(logPoissonPmf(n, mean!) / kernel! - 1)).toBeLessThan(1e-14);
    checked += 1;
  }
  expect(checked).toBeGreaterThan(100);
});

test("the probabilities of all counts add up to 1, and to the distribution function", () => {
  for (const mean of [0.3, 4, 60]) {
    let sum = 0;
    for (let n = 0; n < 300; n += 1) {
      sum += Math.exp(logPoissonPmf(n, mean));
      // n additions of numbers up to 1.
      expect(Math.abs(poissonCdf(n, mean) - sum)).toBeLessThan(1e-14);
    }
    expect(Math.abs(sum - 1)).toBeLessThan(1e-14);
  }
});

test("a mean of 0 gives no counts, and what is no count is refused", () => {
  expect(logPoissonPmf(0, 0)).toBe(0);
  expect(logPoissonPmf(3, 0)).toBe(-Infinity);
  expect(poissonCdf(0, 0)).toBe(1);
  expect(poissonUpperTail(0, 5)).toBe(1);
  expect(poissonUpperTail(1, 0)).toBe(0);
  expect(() => logPoissonPmf(1.5, 2)).toThrow(NumericsError);
  expect(() => poissonCdf(-1, 2)).toThrow(NumericsError);
  expect(() => poissonUpperTail(1, -2)).toThrow(NumericsError);
});
