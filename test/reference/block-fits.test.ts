import { expect, test } from "vitest";
import { blockFit } from "@weighhouse/engine/block/fit";
import { uniformUnknown } from "@weighhouse/engine/block/outer-unknowns";
import {
  ASYMMETRIC,
  type BlockFit,
  type BlockProblem,
  type LinearUnknown,
} from "@weighhouse/engine/block/problem";
import { blockProblem } from "@weighhouse/engine/testing/block-problems";
import { nistModels, nistRegression } from "./nist-regressions";
import { record, relative } from "./records";

const Z: LinearUnknown = { kind: "normal" };
const flat = (lower: number, upper: number): LinearUnknown => ({
  kind: "flat",
  lower,
  upper,
  width: upper - lower,
});

function fitted(problem: BlockProblem): BlockFit {
  const fit = blockFit(problem);
  if (!fit?.ok) throw new Error("refused");
  return fit;
}

// NIST/ITL Statistical Reference Datasets, non-linear: certified residual sums of squares. Every
// parameter is flat over bounds that hold both of NIST's starts with room to spare; where to start
// is left to the fit. Left out for their time alone: Bennett5, Gauss2, Gauss3, Hahn1.
const slow = new Set(["Bennett5", "Gauss2", "Gauss3", "Hahn1"]);

test.each(Object.keys(nistModels).filter((name) => !slow.has(name)))(
  "%s: the certified minimum from flat priors, each parameter costing a degree of freedom",
  (name) => {
    const { y, x, starts, certified, residualSumOfSquares } = nistRegression(name);
    const model = nistModels[name]!;
    // Nelson's model is of log y.
    const observed = name === "Nelson" ? y.map(Math.log) : y;
    const fit = fitted(
      blockProblem({
        observed,
        variance: observed.map(() => 1),
        outer: certified.map((value, j) => {
          const near = [value, starts[0][j]!, starts[1][j]!];
          const room = 0.5 * Math.max(...near.map(Math.abs));
          const bounds = { lower: Math.min(...near) - room, upper: Math.max(...near) + room };
          return uniformUnknown(bounds, { counted: true });
        }),
        evaluate: (outer, _scenario, { base }) => {
          x.forEach((row, i) => (base[i] = model(outer, row)));
          return true;
        },
      }),
    );
    // Lanczos1's residuals of 1e-13 are differences of numbers near 1 and keep three digits.
    const allowed = name === "Lanczos1" ? 5e-3 : 1e-9;
    expect(relative(fit.chiSquare, residualSumOfSquares)).toBeLessThan(allowed);
    expect(fit.flatInside).toBe(certified.length);
  },
);

interface Combined {
  linear_variance: { value: number; chi2: number };
}

test.each(["asym.combine.symmetric", "asym.combine.two_mirror"])(
  "%s: a flat level under readings with a linear variance, inside the clamps",
  (id) => {
    const { inputs, expected } = record<
      Combined,
      { measurements: { value: number; plus: number; minus: number }[] }
    >(id);
    const { measurements } = inputs;
    const fit = fitted(asymmetric(measurements));
    expect(Math.abs(fit.linear[0]! - expected.linear_variance.value)).toBeLessThan(1e-7);
    expect(Math.abs(fit.chiSquare - expected.linear_variance.chi2)).toBeLessThan(1e-10);
  },
);

test("asym.poisson_pairs: two counts' asymmetric intervals taken together", () => {
  const { plus, minus } = intervals();
  const pairs = record<({ counts: number[] } & Combined)[]>("asym.poisson_pairs").expected;
  // Barlow's own variance isn't clamped: pairs whose best value is inside both intervals.
  const inside = pairs.filter(({ counts, linear_variance: { value } }) =>
    counts.every((n) => value > n - minus.get(n)! && value < n + plus.get(n)!),
  );
  expect(inside.length).toBeGreaterThan(1);
  for (const { counts, linear_variance: expected } of inside) {
    const fit = fitted(
      asymmetric(counts.map((n) => ({ value: n, plus: plus.get(n)!, minus: minus.get(n)! }))),
    );
    expect(Math.abs(fit.chiSquare - expected.chi2)).toBeLessThan(1e-9);
    expect(Math.abs(fit.linear[0]! - expected.value)).toBeLessThan(1e-6);
  }
});

function intervals() {
  const rows =
    record<{ n: number; plus: number; minus: number }[]>("asym.poisson_delta_lnL").expected;
  return {
    plus: new Map(rows.map(({ n, plus }) => [n, plus])),
    minus: new Map(rows.map(({ n, minus }) => [n, minus])),
  };
}

function asymmetric(readings: readonly { value: number; plus: number; minus: number }[]) {
  return blockProblem({
    observed: readings.map(({ value }) => value),
    variance: readings.map(() => 0),
    kind: readings.map(() => ASYMMETRIC),
    rows: {
      asymmetric: {
        plus: Float64Array.from(readings, ({ plus }) => plus),
        minus: Float64Array.from(readings, ({ minus }) => minus),
      },
    },
    linear: [flat(-100, 100)],
    design: readings.map(() => [1]),
  });
}

// Peelle's puzzle (1987), as told by D'Agostini, Nucl. Instrum. Meth. A 346 (1994) 306, numbers
// from memory: 1.5 and 1.0, 10 % independent and 20 % common, combine to 0.88 where the common
// error is a share of each reading.
test("a common relative error that scales with the level leaves Peelle's mean between the readings", () => {
  const readings = [1.5, 1];
  const terms = {
    observed: readings,
    variance: readings.map((y) => (0.1 * y) ** 2),
    linear: [flat(0, 10), Z],
  };
  const ofReadings = fitted(blockProblem({ ...terms, design: readings.map((y) => [1, 0.2 * y]) }));
  expect(ofReadings.linear[0]).toBeCloseTo(0.88, 2);
  const ofLevel = fitted(
    blockProblem({
      ...terms,
      design: readings.map(() => [1, 0]),
      atFit: [
        {
          unknown: 1,
          coefficient: Float64Array.of(0.2, 0.2),
          level: Float64Array.of(0, 0),
          of: [0],
        },
      ],
    }),
  );
  const weights = readings.map((y) => 1 / (0.1 * y) ** 2);
  const mean = (weights[0]! * 1.5 + weights[1]!) / (weights[0]! + weights[1]!);
  expect(Math.abs(ofLevel.linear[0]! - mean)).toBeLessThan(1e-9);
});
