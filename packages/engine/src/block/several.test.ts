import { describe, expect, test } from "vitest";
import { blockProblem, denseNormal, randomNumbers } from "../testing/block-problems";
import { blockEvidence } from "./evidence";
import { blockFit } from "./fit";
import { lognormalUnknown, normalUnknown, uniformUnknown } from "./outer-unknowns";
import { parameterSummary } from "./parameter-summary";
import type { BlockEvidence, BlockProblem, LinearUnknown } from "./problem";

// Parameters that enter linearly, but are given as ones that don't: the closed form is known.
const PLACE = { counted: true };
const Z: LinearUnknown = { kind: "normal" };

function linearBlock(dimensions: number, seed: number, shared: boolean) {
  const random = randomNumbers(seed);
  const count = 12;
  const design = Array.from({ length: count }, () =>
    Array.from({ length: dimensions }, () => 2 * random() - 1),
  );
  const observed = design.map(() => 2 * random() - 1);
  const variance = design.map(() => 0.01 + 0.1 * random());
  const covariance = design.map((a, i) =>
    design.map((b, j) => {
      let sum = shared ? 0.04 : 0;
      a.forEach((value, k) => (sum += value * b[k]!));
      return sum + (i === j ? variance[i]! : 0);
    }),
  );
  const problem = blockProblem({
    observed,
    variance,
    linear: shared ? [Z] : [],
    design: observed.map(() => [0.2]),
    outer: Array.from({ length: dimensions }, () => normalUnknown(0, 1, PLACE)),
    evaluate: (outer, _scenario, { base }) => {
      design.forEach((row, i) => {
        let sum = 0;
        row.forEach((value, k) => (sum += value * outer[k]!));
        base[i] = sum;
      });
      return true;
    },
  });
  return { problem, ...denseNormal(observed, covariance) };
}

function scored(problem: BlockProblem): BlockEvidence {
  const found = blockEvidence(problem);
  if (!found.ok) throw new Error(found.refusal.kind);
  return found;
}

describe("outer unknowns with a closed form", () => {
  for (const [dimensions, shared, allowed] of [
    [1, true, 1e-9],
    [2, true, 1e-6],
    [3, false, 1e-6],
  ] as const) {
    test(`${dimensions}: quadrature`, () => {
      const { problem, ln } = linearBlock(dimensions, 31 + dimensions, shared);
      expect(Math.abs(scored(problem).ln - ln)).toBeLessThan(allowed);
    });
  }

  test.each([4, 6])("%i: nested sampling, within three stated errors", (dimensions) => {
    const { problem, ln } = linearBlock(dimensions, 40 + dimensions, false);
    const found = scored(problem);
    expect(found.error).toBeLessThan(0.1);
    expect(Math.abs(found.ln - ln)).toBeLessThan(3 * found.error);
  });

  test.each([1, 2, 3, 5, 8])("%i: the fit is r' C^-1 r", (dimensions) => {
    const { problem, chiSquare } = linearBlock(dimensions, 50 + dimensions, true);
    const fit = blockFit(problem);
    if (!fit?.ok) throw new Error("refused");
    expect(Math.abs(fit.chiSquare / chiSquare - 1)).toBeLessThan(1e-10);
  });
});

test("the same block with the same seed gives the same bytes", () => {
  const { problem } = linearBlock(4, 44, false);
  expect(Object.is(scored(problem).ln, scored(problem).ln)).toBe(true);
});

test("thirty-one outer unknowns are refused, with how many there may be", () => {
  const outcome = blockEvidence(linearBlock(31, 3, false).problem);
  expect(outcome).toEqual({
    ok: false,
    refusal: { kind: "too-many-unknowns", dimensions: 31, limit: 30 },
  });
});

describe("a posterior's summary", () => {
  const x = [0.5, 1, 2, 3, 5];
  const observed = [2.02, 2.35, 2.6, 3.1, 3.9];
  const asOuter = blockProblem({
    observed,
    variance: observed.map(() => 0.01),
    outer: [normalUnknown(1.5, 0.8, PLACE), normalUnknown(0, 0.6, PLACE)],
    evaluate: ([a, b], _scenario, { base }) => {
      x.forEach((at, i) => (base[i] = a! + b! * at));
      return true;
    },
  });
  const asLinear = blockProblem({
    observed,
    variance: observed.map(() => 0.01),
    linear: [Z, Z],
    design: x.map((at) => [0.8, 0.6 * at]),
    evaluate: (_outer, _scenario, { base }) => {
      base.fill(1.5);
      return true;
    },
  });

  test("is the same whether parameters are integrated numerically or in closed form", () => {
    const outer = parameterSummary(scored(asOuter), ([a]) => a!)!;
    const linear = parameterSummary(scored(asLinear), (_outer, _scenario, loadings) => {
      loadings[0] = 0.8;
      return 1.5;
    })!;
    expect(Math.abs(outer.mean - linear.mean) / linear.sd).toBeLessThan(1e-6);
    expect(Math.abs(outer.sd / linear.sd - 1)).toBeLessThan(1e-6);
    outer.quantiles.forEach((value, q) => {
      expect(Math.abs(value - linear.quantiles[q]!) / linear.sd).toBeLessThan(1e-5);
    });
    expect(
      Math.abs(linear.quantiles[2] - linear.mean - 1.959963984540054 * linear.sd),
    ).toBeLessThan(1e-9);
  });

  test("of a combination is that of points of the cubature", () => {
    const outer = parameterSummary(scored(asOuter), ([a, b]) => a! + 4 * b!)!;
    const linear = parameterSummary(scored(asLinear), (_outer, _scenario, loadings) => {
      loadings[0] = 0.8;
      loadings[1] = 2.4;
      return 1.5;
    })!;
    expect(Math.abs(outer.mean - linear.mean) / linear.sd).toBeLessThan(1e-6);
    expect(Math.abs(outer.sd / linear.sd - 1)).toBeLessThan(1e-6);
    outer.quantiles.forEach((value, q) => {
      expect(Math.abs(value - linear.quantiles[q]!) / linear.sd).toBeLessThan(0.02);
    });
  });

  test("of a level cut by its bounds is a cut normal's", () => {
    // N(0.95, 0.1^2) cut to below 1: mean and sd by the cut normal's closed forms.
    const found = scored(
      blockProblem({
        observed: [0.95],
        variance: [0.01],
        linear: [{ kind: "flat", lower: -1, upper: 1, width: 2 }],
        design: [[1]],
      }),
    );
    const { mean, sd } = parameterSummary(found, (_outer, _scenario, loadings) => {
      loadings[0] = 1;
      return 0;
    })!;
    const b = 0.5;
    const density = Math.exp((-b * b) / 2) / Math.sqrt(2 * Math.PI);
    // Phi(0.5), Abramowitz & Stegun table 26.1.
    const ratio = density / 0.6914624612740131;
    expect(Math.abs(mean - (0.95 - 0.1 * ratio))).toBeLessThan(1e-9);
    expect(Math.abs(sd - 0.1 * Math.sqrt(1 - b * ratio - ratio * ratio))).toBeLessThan(1e-9);
  });
});

test("a lognormal and a flat parameter: the fit minds the one's prior and the other's bounds", () => {
  const fit = blockFit(
    blockProblem({
      observed: [3, 3.2, 9],
      variance: [0.04, 0.04, 1],
      outer: [
        lognormalUnknown(0, 0.5, PLACE),
        uniformUnknown({ lower: 0, upper: 4 }, PLACE),
        uniformUnknown({ lower: -1, upper: 1 }, { counted: false }),
      ],
      evaluate: ([scale, level], _scenario, { base }) => {
        base.set([scale!, scale!, scale! + level!]);
        return true;
      },
    }),
  );
  if (!fit?.ok) throw new Error("refused");
  // The level is at its bound: 5.9 - 4 short by about 1.9, shared with the scale.
  const square = (c: number) => {
    const s = Math.exp(0.5 * c);
    return (3 - s) ** 2 / 0.04 + (3.2 - s) ** 2 / 0.04 + (9 - s - 4) ** 2 + c * c;
  };
  let least = Infinity;
  for (let c = 1.5; c < 3; c += 1e-5) least = Math.min(least, square(c));
  expect(Math.abs(fit.chiSquare - least)).toBeLessThan(1e-7);
  expect(fit.flatInside).toBe(0);
});

describe("a covariance that isn't positive definite is refused, with its rows", () => {
  test("a row without noise", () => {
    const problem = blockProblem({ observed: [1, 2], variance: [1, 0] });
    const refusal = { ok: false, refusal: { kind: "singular", rows: [1] } };
    expect(blockEvidence(problem)).toEqual(refusal);
    expect(blockFit(problem)).toEqual(refusal);
  });

  test("two readings of one error", () => {
    const groups = [{ rows: Int32Array.of(0, 2), covariance: Float64Array.of(1, 1, 1, 1) }];
    const problem = blockProblem({ observed: [1, 2, 3], variance: [1, 1, 1], rows: { groups } });
    const refusal = { ok: false, refusal: { kind: "singular", rows: [0, 2] } };
    expect(blockEvidence(problem)).toEqual(refusal);
  });

  test("three tolerances, each against both others", () => {
    const problem = blockProblem({
      observed: [1, 2, 3, 4],
      variance: [1, 1, 1, 1],
      linear: [Z, Z, Z],
      design: [[1], [0, 1], [0, 0, 1], []],
      correlations: [
        { first: 0, second: 1, value: -0.9 },
        { first: 0, second: 2, value: -0.9 },
        { first: 1, second: 2, value: -0.9 },
      ],
    });
    expect(blockEvidence(problem)).toEqual({
      ok: false,
      refusal: { kind: "singular", rows: [0, 1, 2] },
    });
  });
});

test("where nothing expected has a value, Z is zero and there is no fit and no posterior", () => {
  const problem = blockProblem({ observed: [1], variance: [1], evaluate: () => false });
  const found = scored(problem);
  expect(found.ln).toBe(-Infinity);
  expect(found.posterior()).toEqual([]);
  expect(blockFit(problem)).toBeNull();
});
