import { describe, expect, test } from "vitest";
import { minimiseLeastSquares, type LeastSquaresProblem } from "./levenberg-marquardt";
import { sobolPoints } from "./sobol";

/** |A x - b|^2 with A row by row. */
function linearProblem(a: Float64Array, b: Float64Array): LeastSquaresProblem {
  const size = a.length / b.length;
  return {
    count: b.length,
    start: new Float64Array(size),
    residuals(x, out) {
      b.forEach((target, i) => {
        let sum = -target;
        for (let j = 0; j < size; j += 1) sum += a[i * size + j]! * x[j]!;
        out[i] = sum;
      });
    },
    jacobian: (_, out) => out.set(a),
  };
}

/** The bounded minimum found the long way: every choice of which components lie at which bound. */
function bruteForce(problem: LeastSquaresProblem, lower: number, upper: number): number {
  const size = problem.start.length;
  let best = Infinity;
  for (let choice = 0; choice < 3 ** size; choice += 1) {
    const held = Array.from({ length: size }, (_, j) => Math.floor(choice / 3 ** j) % 3);
    const free = held.flatMap((how, j) => (how === 0 ? [j] : []));
    const x = Float64Array.from(held, (how) => (how === 1 ? lower : upper));
    if (free.length > 0) {
      const inner = minimiseLeastSquares({
        count: problem.count,
        start: new Float64Array(free.length),
        residuals(part, out) {
          free.forEach((j, k) => (x[j] = part[k]!));
          problem.residuals(x, out);
        },
      });
      free.forEach((j, k) => (x[j] = inner.x[k]!));
    }
    if (x.some((value) => value < lower || value > upper)) continue;
    const out = new Float64Array(problem.count);
    problem.residuals(x, out);
    best = Math.min(
      best,
      out.reduce((sum, r) => sum + r * r, 0),
    );
  }
  return best;
}

describe("a bounded minimum", () => {
  test("is the best of all choices of components at bounds, for 40 linear problems", () => {
    const points = sobolPoints(28, 40, 1);
    for (let c = 0; c < 40; c += 1) {
      const u = points.subarray(c * 28, (c + 1) * 28).map((value) => 2 * value - 1 + 1e-3);
      const problem = linearProblem(
        u.subarray(0, 21),
        u.subarray(21).map((b) => 2 * b),
      );
      const size = problem.start.length;
      const [lower, upper] = [-0.4, 0.5];
      const fit = minimiseLeastSquares({
        ...problem,
        lower: new Float64Array(size).fill(lower),
        upper: new Float64Array(size).fill(upper),
      });
      expect(fit.converged).toBe(true);
      expect(fit.x.every((value) => value >= lower && value <= upper)).toBe(true);
      const best = bruteForce(problem, lower, upper);
      expect(Math.abs(fit.chiSquare - best)).toBeLessThan(1e-12 * Math.max(best, 1e-3));
    }
  });

  test("is found in a curved valley cut by a bound", () => {
    // Rosenbrock's valley, x <= 1/2: the minimum on the bound is y = x^2, at (1 - x)^2 = 1/4.
    const fit = minimiseLeastSquares({
      count: 2,
      start: [-1.2, 1],
      upper: [0.5, Infinity],
      residuals(x, out) {
        out[0] = 10 * (x[1]! - x[0]! ** 2);
        out[1] = 1 - x[0]!;
      },
    });
    expect(fit.converged).toBe(true);
    expect(fit.x[0]).toBe(0.5);
    expect(fit.x[1]).toBeCloseTo(0.25, 9);
    expect(fit.chiSquare).toBeCloseTo(0.25, 12);
  });

  test("leaves a component whose bounds are one number where it is", () => {
    const fit = minimiseLeastSquares({
      ...linearProblem(Float64Array.of(1, 0, 0, 1, 1, 1), Float64Array.of(3, 5, 9)),
      lower: [2, -Infinity],
      upper: [2, Infinity],
    });
    // y: (y - 5)^2 + (y - 7)^2 is least at 6.
    expect([...fit.x].map((value) => Math.round(value * 1e9) / 1e9)).toEqual([2, 6]);
    expect(fit.chiSquare).toBeCloseTo(1 + 1 + 1, 12);
  });
});

test("Rosenbrock's valley is followed to its end, with and without derivatives", () => {
  const residuals = (x: Float64Array, out: Float64Array): void => {
    out[0] = 10 * (x[1]! - x[0]! ** 2);
    out[1] = 1 - x[0]!;
  };
  const jacobian = (x: Float64Array, out: Float64Array): void => out.set([-20 * x[0]!, 10, -1, 0]);
  for (const given of [jacobian, undefined]) {
    const fit = minimiseLeastSquares({ count: 2, start: [-1.2, 1], residuals, jacobian: given });
    expect(fit.converged).toBe(true);
    expect(fit.chiSquare).toBeLessThan(1e-25);
    expect(fit.x[0]).toBeCloseTo(1, 11);
    expect(fit.x[1]).toBeCloseTo(1, 11);
  }
});

test("the factor is the Jacobian's: R'R = J'J", () => {
  const a = Float64Array.of(1, 2, 3, 4, 5, 6.5, -1, 0.5);
  const { factor, jacobianRank } = minimiseLeastSquares(
    linearProblem(a, Float64Array.of(1, 2, 2, 7)),
  );
  const product = (m: Float64Array, rows: number, j: number, k: number): number =>
    Array.from({ length: rows }, (_, i) => m[i * 2 + j]! * m[i * 2 + k]!).reduce((s, v) => s + v);
  for (const [j, k] of [
    [0, 0],
    [0, 1],
    [1, 1],
  ] as const) {
    expect(product(factor, 2, j, k)).toBeCloseTo(product(a, 4, j, k), 12);
  }
  expect(factor[2]).toBe(0);
  expect(jacobianRank).toBe(2);
});

test("unknowns that only their sum is known of lower the rank, and the minimum is still found", () => {
  const fit = minimiseLeastSquares(
    linearProblem(Float64Array.of(1, 1, 2, 2, 3, 3), Float64Array.of(1, 2, 4)),
  );
  expect(fit.jacobianRank).toBe(1);
  expect(fit.converged).toBe(true);
  expect(fit.x[0]! + fit.x[1]!).toBeCloseTo(17 / 14, 12);
});

test("an unknown that touches nothing stays where it started", () => {
  const fit = minimiseLeastSquares({
    ...linearProblem(Float64Array.of(1, 0, 1, 0), Float64Array.of(1, 2)),
    start: [0, 7],
  });
  expect(fit.x[1]).toBe(7);
  expect(fit.x[0]).toBeCloseTo(1.5, 12);
  expect(fit.jacobianRank).toBe(1);
});

describe("residuals that aren't finite", () => {
  test("at a trial point shorten the step", () => {
    // ln x at data around ln 1e-3, from far above: the first steps go below 0.
    const fit = minimiseLeastSquares({
      count: 2,
      start: [50],
      residuals(x, out) {
        out[0] = Math.log(x[0]!) - Math.log(1e-3);
        out[1] = 2 * (Math.log(x[0]!) - Math.log(1e-3) - 1);
      },
    });
    expect(fit.converged).toBe(true);
    expect(Math.log(fit.x[0]! / 1e-3)).toBeCloseTo(0.8, 9);
  });

  test("at the start are said, not thrown", () => {
    const fit = minimiseLeastSquares({
      count: 1,
      start: [-1],
      residuals: (x, out) => out.set([Math.log(x[0]!)]),
    });
    expect(fit.chiSquare).toBe(Infinity);
    expect(fit.converged).toBe(false);
    expect(fit.jacobianRank).toBe(0);
  });

  test("on one side of a point leave the other for its derivative", () => {
    const fit = minimiseLeastSquares({
      count: 2,
      start: [0],
      residuals(x, out) {
        out[0] = x[0]! < 0 ? NaN : Math.exp(x[0]!) - 3;
        out[1] = 0.1;
      },
    });
    expect(fit.x[0]).toBeCloseTo(Math.log(3), 9);
  });
});

test("a derivative that isn't finite is taken by differences", () => {
  const fit = minimiseLeastSquares({
    count: 1,
    start: [4],
    residuals: (x, out) => out.set([x[0]! ** 2 - 9]),
    jacobian: (_, out) => out.fill(NaN),
  });
  expect(fit.x[0]).toBeCloseTo(3, 10);
});

test("without unknowns the sum of squares is the residuals'", () => {
  const fit = minimiseLeastSquares({
    count: 2,
    start: [],
    residuals: (_, out) => out.set([3, 4]),
  });
  expect(fit.chiSquare).toBe(25);
  expect(fit.converged).toBe(true);
});

test("a step that ends next to 0 doesn't end the search there", () => {
  // From 0.5 the first radius is 0.5, so that the step towards -0.5 stops at 0 but for rounding.
  const fit = minimiseLeastSquares({
    count: 2,
    start: [0.5],
    residuals: (x, out) => out.set([x[0]! + 1, x[0]!]),
  });
  expect(fit.x[0]).toBeCloseTo(-0.5, 9);
});
