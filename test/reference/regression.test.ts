import { readdirSync } from "node:fs";
import { describe, expect, test } from "vitest";
import {
  minimiseLeastSquares,
  type LeastSquaresFit,
} from "@weighhouse/numerics/levenberg-marquardt";
import { addRow, createSystem } from "@weighhouse/numerics/triangular-system";
import { nistDerivatives, nistModels, nistRegression } from "./nist-regressions";
import { record, relative } from "./records";

function fitted(name: string, start: number[], analytic: boolean): LeastSquaresFit {
  const { y, x } = nistRegression(name);
  const model = nistModels[name]!;
  const derivatives = nistDerivatives[name];
  // Nelson's model is of log y.
  const targets = name === "Nelson" ? y.map(Math.log) : y;
  return minimiseLeastSquares({
    count: y.length,
    start,
    residuals: (b, out) => targets.forEach((target, i) => (out[i] = model(b, x[i]!) - target)),
    jacobian: analytic
      ? (b, out) => x.forEach((row, i) => out.set(derivatives!(b, row), i * start.length))
      : undefined,
  });
}

const runs = Object.keys(nistModels).flatMap((name) =>
  (name in nistDerivatives ? [false, true] : [false]).flatMap((analytic) =>
    [0, 1].map((start) => ({ name, analytic, start, number: start + 1 })),
  ),
);

describe("NIST's certified non-linear regressions", () => {
  test.each(runs)(
    "$name is reached from start $number (derivatives by hand: $analytic)",
    ({ name, analytic, start }) => {
      const { starts, certified, certifiedSd, residualSumOfSquares } = nistRegression(name);
      const fit = fitted(name, starts[start]!, analytic);
      // Lanczos1's residuals of 1e-13 are differences of numbers near 1 and keep three digits; its
      // parameters are printed to no more than a fifth of their uncertainties.
      const blurred = name === "Lanczos1";
      expect(fit.converged).toBe(true);
      expect(fit.jacobianRank).toBe(certified.length);
      certified.forEach((value, j) => {
        expect(relative(fit.x[j]!, value), `parameter ${j + 1}`).toBeLessThan(1e-6);
        expect(Math.abs(fit.x[j]! - value) / certifiedSd[j]!).toBeLessThan(blurred ? 0.3 : 1e-4);
      });
      expect(relative(fit.chiSquare, residualSumOfSquares)).toBeLessThan(blurred ? 5e-3 : 1e-8);
    },
  );

  test("all 27 sets of the archive are fitted", () => {
    const files = readdirSync(new URL("./data/nist/", import.meta.url));
    expect(files.map((file) => file.replace(".dat", "")).toSorted()).toEqual(
      Object.keys(nistModels).toSorted(),
    );
    expect(files).toHaveLength(27);
  });
});

interface LinearInputs {
  x: (number | number[])[];
  y: number[];
}

interface LinearExpected {
  beta: number[];
  rss: number;
}

/** Best-fit sum of squares and coefficients, by rotations of the rows. */
function linearFit(rows: number[][], y: number[]): { rss: number; beta: number[] } {
  const size = rows[0]!.length;
  const system = createSystem(size);
  rows.forEach((row, i) => addRow(system, Float64Array.from([...row, y[i]!])));
  const beta = Array.from({ length: size }, () => 0);
  for (let j = size - 1; j >= 0; j -= 1) {
    let sum = system.data[j * (size + 1) + size]!;
    for (let k = j + 1; k < size; k += 1) sum -= system.data[j * (size + 1) + k]! * beta[k]!;
    beta[j] = sum / system.data[j * (size + 1) + j]!;
  }
  return { rss: system.rss, beta };
}

function powers(degree: number): (x: number) => number[] {
  return (x) => Array.from({ length: degree + 1 }, (_, k) => x ** k);
}

describe("NIST's certified linear regressions, as best-fit chi-squares", () => {
  // 1e-11 of the sum of squares: eps times the condition of the scaled columns, up to 1e4 here.
  test.each([
    ["Norris", (x: number | number[]) => powers(1)(x as number), 1e-11],
    ["Pontius", (x: number | number[]) => powers(2)(x as number), 1e-11],
    ["NoInt1", (x: number | number[]) => [x as number], 1e-11],
    ["Longley", (x: number | number[]) => [1, ...(x as number[])], 1e-9],
  ] as const)("%s", (name, rowOf, betaAccuracy) => {
    const { inputs, expected } = record<LinearExpected, LinearInputs>(`strd.${name}`);
    const { rss, beta } = linearFit(inputs.x.map(rowOf), inputs.y);
    expect(relative(rss, expected.rss)).toBeLessThan(1e-11);
    expected.beta.forEach((value, j) => {
      expect(relative(beta[j]!, value)).toBeLessThan(betaAccuracy);
    });
  });

  test("Filip, of degree 10: twelve digits on Legendre polynomials, seven on plain powers", () => {
    const { inputs, expected } = record<LinearExpected, LinearInputs>("strd.Filip");
    const x = inputs.x as number[];
    const [low, high] = [Math.min(...x), Math.max(...x)];
    const orthogonal = linearFit(
      x.map((value) => legendre(10, (2 * value - low - high) / (high - low))),
      inputs.y,
    );
    expect(relative(orthogonal.rss, expected.rss)).toBeLessThan(1e-12);
    // Powers have a condition of 1e15, and their own rounding costs what is left.
    const plain = linearFit(x.map(powers(10)), inputs.y);
    expect(relative(plain.rss, expected.rss)).toBeLessThan(1e-7);
    expected.beta.forEach((value, j) => expect(relative(plain.beta[j]!, value)).toBeLessThan(1e-6));
  });
});

function legendre(degree: number, t: number): number[] {
  const p = [1, t];
  for (let n = 1; n < degree; n += 1) p.push(((2 * n + 1) * t * p[n]! - n * p[n - 1]!) / (n + 1));
  return p;
}
