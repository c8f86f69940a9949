import { describe, expect, test } from "vitest";
import evidences from "./fixtures/evidences.json";
import { integrateUnitCube } from "./log-integral";
import { logSumExp } from "./log-sum-exp";
import { LN_SQRT_2PI, normalCdf } from "./normal";
import { cubeQuantile, weightedMean, weightedSd } from "./weighted-sample";

// The accuracy that two and three dimensions are held to.
const ACCURACY = 1e-6;

/** ln of a normal density with one sd and one correlation throughout. */
function normal(dimension: number, at: { mean: number; sd: number; rho?: number }) {
  const { mean, sd, rho = 0 } = at;
  const all = 1 + (dimension - 1) * rho;
  const lnDeterminant = (dimension - 1) * Math.log(1 - rho) + Math.log(all);
  const norm = dimension * (LN_SQRT_2PI + Math.log(sd)) + lnDeterminant / 2;
  return (u: Float64Array) => {
    let squares = 0;
    let sum = 0;
    for (const x of u) {
      squares += ((x - mean) / sd) ** 2;
      sum += (x - mean) / sd;
    }
    return -(squares - (rho * sum * sum) / all) / (2 * (1 - rho)) - norm;
  };
}

function fill(dimension: number, value: number) {
  return new Float64Array(dimension).fill(value);
}

const dimensions = [2, 3] as const;

// Exact: normal densities integrate to 1.
describe.each(dimensions)("in %d dimensions", (d) => {
  test.each([
    [0.02, 0],
    [0.01, 0.9],
    [1e-4, 0.999],
  ])("a normal of sd %d and correlation %d needs no hint", (sd, rho) => {
    const { ln, error, evaluations } = integrateUnitCube(normal(d, { mean: 0.41, sd, rho }), d, {
      seed: 1,
    });
    expect(Math.abs(ln)).toBeLessThan(ACCURACY / 50);
    expect(Math.abs(ln)).toBeLessThan(error);
    expect(error).toBeLessThan(ACCURACY);
    expect(evaluations).toBeLessThan(d === 2 ? 5e3 : 6e4);
  });

  test("a narrow, correlated peak on a flat density is found by its hint", () => {
    const peak = normal(d, { mean: 0.3, sd: 1e-4, rho: 0.999 });
    const modes = [{ centre: fill(d, 0.3), scale: fill(d, 1e-4) }];
    const both = (u: Float64Array) => logSumExp([0, peak(u)]);
    const { ln } = integrateUnitCube(both, d, { seed: 1, modes });
    expect(Math.abs(ln - Math.LN2)).toBeLessThan(ACCURACY);
  });

  test("a shape told as a triangular factor finds it as well", () => {
    const sd = 1e-4;
    const factor = new Float64Array(d * d);
    for (let i = 0; i < d; i += 1) {
      factor[i * d] = sd * (i === 0 ? 1 : 0.9);
      if (i > 0) factor[i * d + i] = sd * Math.sqrt(1 - 0.81);
    }
    const peak = normal(d, { mean: 0.3, sd, rho: 0.9 });
    const options = { seed: 1, modes: [{ centre: fill(d, 0.30001), scale: factor }] };
    const { ln } = integrateUnitCube((u) => logSumExp([0, peak(u)]), d, options);
    expect(Math.abs(ln - Math.LN2)).toBeLessThan(ACCURACY);
  });

  test("peaks of 1e-2, apart or overlapping, are found without hints and add up", () => {
    const peaks = [
      normal(d, { mean: 0.3, sd: 0.01 }),
      normal(d, { mean: 0.7, sd: 0.013, rho: 0.5 }),
      normal(d, { mean: 0.74, sd: 0.013 }),
    ];
    for (const some of [peaks, peaks.slice(0, 2)]) {
      const f = (u: Float64Array) => logSumExp(some.map((peak) => peak(u)));
      const { ln } = integrateUnitCube(f, d, { seed: 1 });
      expect(Math.abs(ln - Math.log(some.length))).toBeLessThan(ACCURACY);
    }
    const onFlat = (u: Float64Array) => logSumExp([0, peaks[0]!(u)]);
    const { ln } = integrateUnitCube(onFlat, d, { seed: 1 });
    expect(Math.abs(ln - Math.LN2)).toBeLessThan(ACCURACY);
  });

  test("peaks cut off by the cube's faces", () => {
    const half = normal(d, { mean: 0, sd: 0.05 });
    const { ln } = integrateUnitCube(half, d, { seed: 1 });
    expect(Math.abs(ln + d * Math.LN2)).toBeLessThan(ACCURACY);
    const steep = (u: Float64Array) => u.reduce((sum, x) => sum - 300 * x, d * Math.log(300));
    expect(Math.abs(integrateUnitCube(steep, d, { seed: 1 }).ln)).toBeLessThan(ACCURACY);
  });

  test("kinks that are told: a product of one-dimensional integrals", () => {
    const f = (u: Float64Array) => -Math.abs(u[0]! - 1 / 3) * 20 - Math.abs(u[1]! - 0.6) * 5;
    const side = (at: number, slope: number) =>
      Math.log((2 - Math.exp(-slope * at) - Math.exp(-slope * (1 - at))) / slope);
    const { ln } = integrateUnitCube(f, d, { seed: 1, breaks: [[1 / 3], [0.6]] });
    expect(Math.abs(ln - side(1 / 3, 20) - side(0.6, 5))).toBeLessThan(ACCURACY);
  });

  test("a bent ridge is followed to its ends", () => {
    // u_1 - 0.02 x^2 makes no difference to the volume; the sides of the cube cut off 5.7e-7.
    const f = (u: Float64Array) => {
      const x = (u[0]! - 0.5) / 0.1;
      const y = (u[1]! - 0.4 - 0.02 * x * x) / 0.01;
      const z = d === 3 ? (u[2]! - 0.5) / 0.02 : 0;
      return -(x * x + y * y + z * z) / 2;
    };
    const exact = 2 * LN_SQRT_2PI + Math.log(0.001) + (d === 3 ? LN_SQRT_2PI + Math.log(0.02) : 0);
    const { ln } = integrateUnitCube(f, d, { seed: 1 });
    expect(Math.abs(ln - exact - Math.log1p(-2 * normalCdf(-5)))).toBeLessThan(ACCURACY);
  });

  test("quantiles along every axis are right to 1e-3 of the sd; mean and sd to 1e-6", () => {
    const sd = 1e-3;
    const integral = integrateUnitCube(normal(d, { mean: 0.4, sd, rho: 0.95 }), d, { seed: 1 });
    const { points, lnWeights } = integral.nodes;
    for (let axis = 0; axis < d; axis += 1) {
      for (const z of [-1.959963984540054, 0, 1]) {
        const found = cubeQuantile(integral, axis, normalCdf(z));
        expect(Math.abs(found - 0.4 - z * sd)).toBeLessThan(1e-3 * sd);
      }
      const values = lnWeights.map((_, i) => points[i * d + axis]!);
      expect(Math.abs(weightedMean(values, lnWeights) - 0.4)).toBeLessThan(1e-6 * sd);
      expect(Math.abs(weightedSd(values, lnWeights) / sd - 1)).toBeLessThan(1e-6);
    }
  });
});

test("half of the square, cut across: the density may be 0 anywhere", () => {
  const f = (u: Float64Array) => (u[0]! + u[1]! < 0.6 ? -2 * u[0]! : -Infinity);
  // int_0^0.6 (0.6 - x) e^(-2x) dx = (0.6 - (1 - e^-1.2) / 2) / 2
  const exact = Math.log((0.6 - (1 - Math.exp(-1.2)) / 2) / 2);
  expect(Math.abs(integrateUnitCube(f, 2, { seed: 1 }).ln - exact)).toBeLessThan(ACCURACY);
});

test("untold kinks, to a looser tolerance: within the stated error", () => {
  const f = (u: Float64Array) => -Math.abs(u[0]! - 1 / 3) * 20 - Math.abs(u[1]! - 0.6) * 5;
  const side = (at: number, slope: number) =>
    Math.log((2 - Math.exp(-slope * at) - Math.exp(-slope * (1 - at))) / slope);
  const { ln, error } = integrateUnitCube(f, 2, { seed: 1, relative: 1e-3 });
  expect(Math.abs(ln - side(1 / 3, 20) - side(0.6, 5))).toBeLessThan(error);
  expect(error).toBeLessThan(1e-3);
});

// fixtures/evidences.json: Feroz, Hobson & Bridges, MNRAS 398 (2009) 1601, recomputed.
describe("published evidences", () => {
  test("the egg-box with its eighteen peaks", () => {
    const { expected, tol } = evidences.records.find(({ id }) => id === "evidence.eggbox")!;
    const f = ([a, b]: Float64Array) =>
      (2 + Math.cos(5 * Math.PI * a!) * Math.cos(5 * Math.PI * b!)) ** 5;
    const { ln_Z } = expected as { ln_Z: number };
    const { ln } = integrateUnitCube(f, 2, { seed: 1 });
    expect(Math.abs(ln - ln_Z)).toBeLessThan(tol.value);
  });
});
