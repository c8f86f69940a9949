import { describe, expect, test } from "vitest";
import { normalCdf, normalQuantile } from "@weighhouse/numerics/normal";
import { densityOf } from "./density";
import { cdf, meanOf, quantile, sdOf, upperTail, within, type Distribution } from "./distribution";
import { drawsOf } from "./draws";

/** exp(-(x - m)^2 / 2 s^2) as a density that is only known by its log. */
function asDensity(m: number, s: number, range = { lower: -Infinity, upper: Infinity }) {
  const ln = (x: number) => -(((x - m) / s) ** 2) / 2 + 7;
  return densityOf(ln, { ...range, breaks: [m - s, m + 2 * s], scale: s })!;
}

describe("a density known by its log", () => {
  test("is normalised, whatever its height, and has the moments of the normal that it is", () => {
    const density = asDensity(3, 0.25);
    expect(density.mean).toBeCloseTo(3, 12);
    expect(density.sd).toBeCloseTo(0.25, 12);
    expect(density.ln(3)).toBeCloseTo(-Math.log(0.25 * Math.sqrt(2 * Math.PI)), 11);
  });

  test("has tails right to their own size", () => {
    const density = asDensity(0, 1);
    for (const z of [-7, -3, 0.4, 2, 6]) {
      expect(cdf(density, z) / normalCdf(z)).toBeCloseTo(1, 8);
      expect(upperTail(density, z) / normalCdf(-z)).toBeCloseTo(1, 8);
    }
    expect(quantile(density, 0.975)).toBeCloseTo(normalQuantile(0.975), 10);
    expect(within(density, -1, 1)).toBeCloseTo(normalCdf(1) - normalCdf(-1), 12);
  });

  test("cut off at a bound it is the truncated normal (Johnson, Kotz & Balakrishnan, 13.10)", () => {
    const density = asDensity(0, 1, { lower: 1, upper: Infinity });
    const phi = Math.exp(-0.5) / Math.sqrt(2 * Math.PI);
    const ratio = phi / normalCdf(-1);
    expect(density.mean).toBeCloseTo(ratio, 11);
    expect(density.sd).toBeCloseTo(Math.sqrt(1 + ratio - ratio * ratio), 11);
    expect(cdf(density, 1)).toBe(0);
  });

  test("finds a peak far narrower than its range, and one at a bound", () => {
    const narrow = asDensity(0.7, 1e-7, { lower: -1e3, upper: 1e3 });
    expect((narrow.mean - 0.7) / 1e-7).toBeCloseTo(0, 6);
    expect(narrow.sd / 1e-7).toBeCloseTo(1, 8);
    const beyond = asDensity(-1, 1e-2, { lower: 0, upper: 100 });
    // exp(-x / 1e-4) near enough: mean s^2 / distance.
    expect(beyond.mean).toBeCloseTo(1e-4, 7);
  });

  test("is none where nothing is possible", () => {
    expect(densityOf(() => -Infinity, { lower: 0, upper: 1, breaks: [], scale: 1 })).toBeNull();
  });
});

describe("draws", () => {
  test("equally spaced in probability, they are the quantiles that they are made of", () => {
    const n = 2 ** 12;
    const values = Float64Array.from({ length: n }, (_, k) => normalQuantile((k + 0.5) / n));
    const draws = drawsOf(values.reverse(), "middles")!;
    expect(quantile(draws, 0.25)).toBeCloseTo(normalQuantile(0.25), 6);
    expect(cdf(draws, 0)).toBe(0.5);
    expect(quantile(drawsOf(Float64Array.of(4, 1, 2))!, 0.75)).toBe(3);
  });

  test("without a value are left out, and mean nothing where they are half", () => {
    expect(drawsOf(Float64Array.of(2, NaN, 1, 3))!.sorted).toEqual(Float64Array.of(1, 2, 3));
    expect(drawsOf(Float64Array.of(2, NaN))).toBeNull();
  });
});

describe("mixtures", () => {
  const mixture: Distribution = {
    kind: "mixture",
    parts: [
      { weight: 0.25, of: { kind: "normal", mean: -1, sd: 1 } },
      { weight: 0.75, of: { kind: "splitNormal", mode: 2, plus: 1, minus: 3 } },
    ],
  };

  test("have quantiles that their distribution function takes back", () => {
    for (const p of [0.01, 0.3, 0.5, 0.99]) {
      expect(cdf(mixture, quantile(mixture, p))).toBeCloseTo(p, 13);
    }
  });

  test("have the moments of their density, by the trapezoid rule", () => {
    let [whole, first, second] = [0, 0, 0];
    const step = 1e-3;
    for (let x = -30; x < 30; x += step) {
      const mass = within(mixture, x, x + step);
      whole += mass;
      first += mass * (x + step / 2);
      second += mass * (x + step / 2) ** 2;
    }
    expect(whole).toBeCloseTo(1, 10);
    expect(meanOf(mixture)).toBeCloseTo(first, 6);
    expect(sdOf(mixture)).toBeCloseTo(Math.sqrt(second - first * first), 6);
  });
});
