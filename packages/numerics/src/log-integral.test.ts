import { describe, expect, test } from "vitest";
import { integrateUnitCube } from "./log-integral";
import { logSumExp } from "./log-sum-exp";
import { logNormalInterval, LN_SQRT_2PI, normalCdf } from "./normal";
import { NumericsError } from "./numerics-error";
import { cubeQuantile } from "./weighted-sample";

// The accuracy that one dimension is held to; what is given here is met a hundredfold.
const ACCURACY = 1e-9;

type OnLine = (x: number) => number;

function onLine(f: OnLine, options: Partial<Parameters<typeof integrateUnitCube>[2]> = {}) {
  return integrateUnitCube((u) => f(u[0]!), 1, { seed: 1, ...options });
}

function normal(mean: number, sd: number): OnLine {
  return (x) => -(((x - mean) / sd) ** 2) / 2 - LN_SQRT_2PI - Math.log(sd);
}

function mode(centre: number, scale: number) {
  return { centre: Float64Array.of(centre), scale: Float64Array.of(scale) };
}

describe("no dimension", () => {
  test("is the density itself", () => {
    const { ln, error, nodes } = integrateUnitCube(() => -3.5, 0, { seed: 1 });
    expect({ ln, error, weights: [...nodes.lnWeights] }).toEqual({
      ln: -3.5,
      error: 0,
      weights: [0],
    });
    expect(integrateUnitCube(() => -Infinity, 0, { seed: 1 }).ln).toBe(-Infinity);
  });
});

// Exact values are those of normal intervals and elementary integrals.
describe("one dimension", () => {
  test.each([0.3, 1e-2, 1e-4, 1e-6])("a normal of sd %d is found without a hint", (sd) => {
    const { ln, error } = onLine(normal(0.37, sd));
    const exact = logNormalInterval(-0.37 / sd, 0.63 / sd);
    expect(Math.abs(ln - exact)).toBeLessThan(ACCURACY / 100);
    expect(error).toBeLessThan(ACCURACY / 10);
  });

  test("a peak of 1e-8 on a flat density is found by its hint, however rough", () => {
    for (const [centre, scale] of [
      [0.123456, 1e-8],
      [0.12345602, 3e-8],
    ] as const) {
      const peak = normal(0.123456, 1e-8);
      const { ln } = onLine((x) => logSumExp([0, peak(x)]), { modes: [mode(centre, scale)] });
      // Numbers of 0.12 are 1e-17 apart, 1e-9 sd.
      expect(Math.abs(ln - Math.LN2)).toBeLessThan(ACCURACY);
    }
  });

  test.each([0.1, 0.123456, 0.7771])("a peak of 1e-4 at %d on a flat density, unhinted", (at) => {
    const peak = normal(at, 1e-4);
    const { ln } = onLine((x) => logSumExp([0, peak(x)]));
    expect(Math.abs(ln - Math.LN2)).toBeLessThan(ACCURACY);
  });

  test("several peaks of any widths add up", () => {
    const peaks = [normal(0.1, 1e-3), normal(0.102, 2e-4), normal(0.5, 0.01), normal(0.9, 1e-3)];
    const { ln } = onLine((x) => logSumExp(peaks.map((peak) => peak(x))));
    expect(Math.abs(ln - Math.log(4))).toBeLessThan(ACCURACY);
  });

  test("kinks and steps: told, cheaply; untold, within the accuracy too", () => {
    const kink: OnLine = (x) => -Math.abs(x - 1 / 3) * 20;
    const exact = Math.log((2 - Math.exp(-20 / 3) - Math.exp(-40 / 3)) / 20);
    const step: OnLine = (x) => (x < 1 / 7 ? -Infinity : 0);
    const told = onLine(step, { breaks: [[1 / 7]] });
    const untold = onLine(step);
    for (const { ln } of [told, untold])
      expect(Math.abs(ln - Math.log(6 / 7))).toBeLessThan(ACCURACY);
    expect(told.evaluations).toBeLessThan(untold.evaluations - 500);
    expect(Math.abs(onLine(kink, { breaks: [[1 / 3]] }).ln - exact)).toBeLessThan(ACCURACY / 100);
    expect(Math.abs(onLine(kink).ln - exact)).toBeLessThan(ACCURACY);
  });

  test("what is piled up at an end, and an integrable pole there", () => {
    expect(Math.abs(onLine((x) => -1e7 * x).ln + Math.log(1e7))).toBeLessThan(ACCURACY);
    expect(Math.abs(onLine((x) => -Math.log(x) / 2).ln - Math.LN2)).toBeLessThan(ACCURACY);
  });

  test("a constant added to the log density is added to ln Z", () => {
    const { ln, error } = onLine((x) => 1e5 + normal(0.4, 1e-3)(x));
    // A log density of 1e5 has an eps of 1.5e-11.
    expect(Math.abs(ln - 1e5)).toBeLessThan(1e-10);
    expect(error).toBeGreaterThan(1e-11);
  });

  test("quantiles are right to 1e-6 of the sd", () => {
    const sd = 1e-3;
    const integral = onLine(normal(0.4, sd));
    for (const z of [-3, -1.959963984540054, -1, 0, 0.5, 2]) {
      const found = cubeQuantile(integral, 0, normalCdf(z));
      expect(Math.abs(found - (0.4 + z * sd))).toBeLessThan(1e-6 * sd);
    }
  });

  test("the information of a normal is -ln(sd sqrt(2 pi e)), and the weights add up to 1", () => {
    const { information, nodes } = onLine(normal(0.4, 1e-3));
    expect(information).toBeCloseTo(-Math.log(1e-3) - LN_SQRT_2PI - 0.5, 9);
    expect(Math.abs(logSumExp([...nodes.lnWeights]))).toBeLessThan(1e-13);
  });
});

describe("whatever the density does, nothing is NaN", () => {
  test.each([0, 1, 2, 3, 4])(
    "in %d dimensions a density that is 0 or NaN everywhere gives -Infinity",
    (d) => {
      for (const nothing of [-Infinity, Number.NaN]) {
        const { ln, error, information, nodes } = integrateUnitCube(() => nothing, d, { seed: 1 });
        expect({ ln, information, count: nodes.lnWeights.length }).toEqual({
          ln: -Infinity,
          information: 0,
          count: 0,
        });
        expect(error).toBe(0);
      }
    },
    20_000,
  );

  test("an infinite density, a wrong dimension and a misfit mode are refused by name", () => {
    const refused = (run: () => unknown, message: RegExp) => {
      expect(run).toThrow(NumericsError);
      expect(run).toThrow(message);
    };
    refused(() => onLine(() => Infinity), /finite/);
    refused(() => integrateUnitCube(() => 0, 31, { seed: 1 }), /0 to 30 unknowns; found 31/);
    refused(() => onLine(() => 0, { modes: [mode(0.5, 0)] }), /widths above 0/);
    refused(() => integrateUnitCube(() => 0, 2, { seed: 1, modes: [mode(0.5, 1)] }), /2 numbers/);
  });
});
