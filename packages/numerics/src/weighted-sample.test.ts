import { describe, expect, test } from "vitest";
import { normalCdf } from "./normal";
import { weightedMean, weightedQuantile, weightedSd } from "./weighted-sample";

const halves = Float64Array.of(Math.log(0.25), Math.log(0.5), Math.log(0.25));

describe("weighted values", () => {
  test("mean and sd are those of the discrete distribution", () => {
    expect(weightedMean([1, 2, 3], halves)).toBeCloseTo(2, 14);
    expect(weightedSd([1, 2, 3], halves)).toBeCloseTo(Math.SQRT1_2, 14);
    expect(weightedSd([1e9, 1e9 + 1, 1e9 + 2], halves)).toBeCloseTo(Math.SQRT1_2, 6);
  });

  test("quantiles run straight from the middle of one value's step to that of the next", () => {
    // Middles at 0.125, 0.5 and 0.875.
    for (const values of [
      [1, 2, 3],
      [3, 2, 1],
    ]) {
      const at = (p: number) => weightedQuantile(values, halves, p);
      expect([0, 0.125, 0.3125, 0.5, 0.875, 1].map(at)).toEqual([1, 1, 1.5, 2, 3, 3]);
    }
  });

  test("quantiles of a thousand weighted points are those of the density to 1e-3 sd", () => {
    const values = Array.from({ length: 1001 }, (_, i) => -8 + (16 * i) / 1000);
    const sum = values.reduce((total, z) => total + Math.exp((-z * z) / 2), 0);
    const lnWeights = Float64Array.from(values, (z) => (-z * z) / 2 - Math.log(sum));
    for (const z of [-2, -0.3, 0, 1.5]) {
      expect(Math.abs(weightedQuantile(values, lnWeights, normalCdf(z)) - z)).toBeLessThan(1e-3);
    }
  });
});
