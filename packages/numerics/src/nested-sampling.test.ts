import { describe, expect, test } from "vitest";
import evidences from "./fixtures/evidences.json";
import { integrateUnitCube } from "./log-integral";
import { logSumExp } from "./log-sum-exp";
import { logNormalInterval, LN_SQRT_2PI } from "./normal";
import { cubeQuantile, weightedMean, weightedSd } from "./weighted-sample";

type LogDensity = (u: Float64Array) => number;

function normal(dimension: number, at: { mean: number; sd: number; rho?: number }): LogDensity {
  const { mean, sd, rho = 0 } = at;
  const all = 1 + (dimension - 1) * rho;
  const lnDeterminant = (dimension - 1) * Math.log(1 - rho) + Math.log(all);
  const norm = dimension * (LN_SQRT_2PI + Math.log(sd)) + lnDeterminant / 2;
  return (u) => {
    let squares = 0;
    let sum = 0;
    for (const x of u) {
      squares += ((x - mean) / sd) ** 2;
      sum += (x - mean) / sd;
    }
    return -(squares - (rho * sum * sum) / all) / (2 * (1 - rho)) - norm;
  };
}

/** Within three of the stated errors, and that error at most 0.1 where the information allows it. */
function check(f: LogDensity, dimension: number, exact: number) {
  const integral = integrateUnitCube(f, dimension, { seed: 20_260_101 });
  const { ln, error, information } = integral;
  expect(Math.abs(ln - exact), `ln Z ${ln}, error ${error}`).toBeLessThan(3 * error);
  if (information < 40) expect(error).toBeLessThanOrEqual(0.1);
  return integral;
}

describe("analytic evidences from four dimensions on", () => {
  test.each([
    [4, 0.05, 2.5e4],
    [6, 0.08, 4e4],
    [10, 0.2, 1e5],
  ])("a normal in %d dimensions, sd %d, in fewer than %d calls", (d, sd, most) => {
    const exact = d * logNormalInterval(-0.5 / sd, 0.5 / sd);
    const { evaluations, information } = check(normal(d, { mean: 0.5, sd }), d, exact);
    expect(evaluations).toBeLessThan(most);
    expect(information).toBeCloseTo(-d * (LN_SQRT_2PI + Math.log(sd) + 0.5), -0.5);
  });

  test("correlations of 0.99", () => {
    check(normal(4, { mean: 0.5, sd: 0.08, rho: 0.99 }), 4, 0);
  });

  test("a normal cut off in a corner", () => {
    check(normal(4, { mean: 0, sd: 0.1 }), 4, -4 * Math.LN2);
  });

  test("two peaks of unequal widths", () => {
    const peaks = [normal(4, { mean: 0.25, sd: 0.04 }), normal(4, { mean: 0.7, sd: 0.06 })];
    check((u) => logSumExp(peaks.map((peak) => peak(u))), 4, Math.LN2);
  });

  test("twenty dimensions, nearly flat", () => {
    check(normal(20, { mean: 0.5, sd: 0.6 }), 20, 20 * logNormalInterval(-1 / 1.2, 1 / 1.2));
  });
});

describe("plateaus", () => {
  test("a flat density needs its first points only", () => {
    const { ln, error, evaluations } = integrateUnitCube(() => 7, 5, { seed: 1 });
    expect(Math.abs(ln - 7)).toBeLessThan(1e-12);
    expect(error).toBeLessThan(1e-6);
    expect(evaluations).toBeLessThan(1100);
  });

  test("a region of density 0 is measured by the draws that fall into it", () => {
    const f: LogDensity = (u) => (u[0]! + u[1]! < 0.3 ? -3 * u[2]! : -Infinity);
    check(f, 4, Math.log(0.045 * ((1 - Math.exp(-3)) / 3)));
  });

  test("terraces, each of them level", () => {
    // e^0 within 0.4 about the middle along the first axis, e^-5 within 0.8, e^-9 outside.
    const f: LogDensity = ([x]) =>
      Math.abs(x! - 0.5) < 0.2 ? 0 : Math.abs(x! - 0.5) < 0.4 ? -5 : -9;
    check(f, 4, Math.log(0.4 + 0.4 * Math.exp(-5) + 0.2 * Math.exp(-9)));
  });
});

// fixtures/evidences.json: Feroz, Hobson & Bridges, MNRAS 398 (2009) 1601, table 2, recomputed.
describe("published evidences", () => {
  const { expected } = evidences.records.find(({ id }) => id === "evidence.gaussian_shells")!;

  test("twin Gaussian shells in five dimensions", () => {
    const f: LogDensity = (u) => {
      const squares = [3.5, -3.5].map((centre) =>
        u.reduce((sum, x, i) => sum + (12 * x - 6 - (i === 0 ? centre : 0)) ** 2, 0),
      );
      return logSumExp(
        squares.map((r2) => -((Math.sqrt(r2) - 2) ** 2) / 0.02 - LN_SQRT_2PI - Math.log(0.1)),
      );
    };
    const { ln_Z } = (expected as { D: number; ln_Z: number }[]).find(({ D }) => D === 5)!;
    check(f, 5, ln_Z);
  });
});

test("the same seed gives the same bytes, another one another run", () => {
  const f = normal(4, { mean: 0.5, sd: 0.2 });
  const run = (seed: number) => integrateUnitCube(f, 4, { seed });
  const first = run(5);
  expect(run(5)).toEqual(first);
  expect(run(6).ln).not.toBe(first.ln);
});

test("errors are honest: over six seeds their mean square is that of a standard normal", () => {
  const sd = 0.25;
  const f = normal(4, { mean: 0.5, sd });
  const exact = 4 * logNormalInterval(-0.5 / sd, 0.5 / sd);
  let squares = 0;
  for (let seed = 1; seed <= 6; seed += 1) {
    const { ln, error } = integrateUnitCube(f, 4, { seed });
    squares += ((ln - exact) / error) ** 2;
  }
  // Chi-square of 6 degrees of freedom: 99.9 % of it below 22.5 (NIST handbook, upper tails).
  expect(squares).toBeLessThan(22.5);
});

test("the posterior's mean, sd and quantiles within their Monte Carlo noise", () => {
  const sd = 0.04;
  const integral = integrateUnitCube(normal(4, { mean: 0.45, sd }), 4, { seed: 3 });
  const { points, lnWeights } = integral.nodes;
  const values = lnWeights.map((_, i) => points[i * 4]!);
  // Some 1500 points carry the weight: 1 / sqrt(1500) is 0.026 sd.
  expect(Math.abs(weightedMean(values, lnWeights) - 0.45)).toBeLessThan(0.1 * sd);
  expect(Math.abs(weightedSd(values, lnWeights) / sd - 1)).toBeLessThan(0.1);
  expect(Math.abs(cubeQuantile(integral, 0, 0.8413447460685429) - 0.49)).toBeLessThan(0.15 * sd);
});
