import { expect, test } from "vitest";
import fixture from "./fixtures/split-normal.json";
import { normalCdf } from "./normal";
import { NumericsError } from "./numerics-error";
import {
  logSplitNormalPdf,
  splitNormalCdf,
  splitNormalQuantile,
  splitNormalUpperTail,
} from "./split-normal";

test("a split normal's density and tails are mpmath's quadratures", () => {
  for (const [mode, plus, minus, x, logPdf, cdf, upperTail] of fixture.rows) {
    const split = { mode: mode!, plus: plus!, minus: minus! };
    expect(Math.abs(logSplitNormalPdf(x!, split) / logPdf! - 1)).toBeLessThan(1e-14);
    expect(Math.abs(splitNormalCdf(x!, split) / cdf! - 1)).toBeLessThan(1e-12);
    expect(Math.abs(splitNormalUpperTail(x!, split) / upperTail! - 1)).toBeLessThan(1e-12);
  }
  expect(fixture.rows).toHaveLength(44);
});

test("its quantiles have the probability asked for, on either side of the mode", () => {
  const split = { mode: 7, plus: 2, minus: 0.25 };
  for (const p of [1e-200, 1e-12, 0.01, 0.11, 0.25 / 2.25, 0.12, 0.5, 0.9, 1 - 1e-10]) {
    const x = splitNormalQuantile(p, split);
    // x's own last digit, 1e-15, times the slope of ln p, |z| / s.
    const allowed = 1e-13 * Math.max(1, Math.abs(x - 7) / 0.25 ** 2);
    expect(Math.abs(splitNormalCdf(x, split) / p - 1)).toBeLessThan(allowed);
  }
  expect(splitNormalQuantile(0.25 / 2.25, split)).toBeCloseTo(7, 14);
  expect(splitNormalQuantile(0, split)).toBe(-Infinity);
  expect(splitNormalQuantile(1, split)).toBe(Infinity);
  expect(() => splitNormalQuantile(2, split)).toThrow(NumericsError);
});

test("with equal sides it is the normal", () => {
  for (const x of [-9, -1, 0.5, 4]) {
    expect(
      Math.abs(splitNormalCdf(x, { mode: 0.5, plus: 2, minus: 2 }) / normalCdf((x - 0.5) / 2) - 1),
    ).toBeLessThan(1e-14);
  }
});
