import { describe, expect, test } from "vitest";
import { blockEvidence } from "@weighhouse/engine/block/evidence";
import { blockFit } from "@weighhouse/engine/block/fit";
import { censoredFactor } from "@weighhouse/engine/block/factors";
import { uniformUnknown } from "@weighhouse/engine/block/outer-unknowns";
import { parameterSummary } from "@weighhouse/engine/block/parameter-summary";
import {
  FACTOR,
  NORMAL,
  type BlockEvidence,
  type LinearUnknown,
} from "@weighhouse/engine/block/problem";
import { blockProblem, type BlockTerms } from "@weighhouse/engine/testing/block-problems";
import { record, relative } from "./records";

// Published and recomputed evidences (see each record's source and status), block by block.
const PLACE = { counted: true };
const Z: LinearUnknown = { kind: "normal" };

function evidence(terms: BlockTerms): BlockEvidence {
  const found = blockEvidence(blockProblem(terms));
  if (!found.ok) throw new Error(found.refusal.kind);
  return found;
}

/** A density over parameters flat in a box, whatever it is. */
function overBox(
  dimensions: number,
  [lower, upper]: readonly [number, number],
  ln: (values: Float64Array) => number,
) {
  return evidence({
    observed: [],
    variance: [],
    outer: Array.from({ length: dimensions }, () => uniformUnknown({ lower, upper }, PLACE)),
    outerFactor: ln,
  });
}

test("evidence.linear_gaussian_polynomial: evidence, posterior means, and chi-square without priors", () => {
  const { inputs, expected } = record<
    { degree: number; ln_evidence: number; posterior_mean: number[]; chi2_min: number }[],
    { x: number[]; y: number[]; sigma: number }
  >("evidence.linear_gaussian_polynomial");
  const { x, y, sigma } = inputs;
  for (const { degree, ln_evidence, posterior_mean, chi2_min } of expected) {
    const powers = Array.from({ length: degree + 1 }, (_, k) => k);
    const rows = { observed: y, variance: y.map(() => sigma * sigma) };
    const found = evidence({
      ...rows,
      linear: powers.map(() => Z),
      design: x.map((at) => powers.map((k) => 2 * at ** k)),
    });
    expect(relative(found.ln, ln_evidence)).toBeLessThan(1e-11);
    posterior_mean.forEach((mean, k) => {
      const summary = parameterSummary(found, (_outer, _scenario, loadings) => {
        loadings[k] = 2;
        return 0;
      })!;
      expect(Math.abs(summary.mean - mean)).toBeLessThan(1e-10);
    });
    const fit = blockFit(
      blockProblem({
        ...rows,
        linear: powers.map(() => ({ kind: "flat", lower: -100, upper: 100, width: 200 })),
        design: x.map((at) => powers.map((k) => at ** k)),
      }),
    );
    if (!fit?.ok) throw new Error("refused");
    expect(relative(fit.chiSquare, chi2_min)).toBeLessThan(1e-10);
    expect(fit.flatInside).toBe(degree + 1);
  }
});

test("evidence.gaussian_gaussian: correlated readings of independent normals", () => {
  const { expected } = record<
    { D: number; rho: number; prior_sd: number; data: number[]; ln_Z: number }[]
  >("evidence.gaussian_gaussian");
  for (const { D, rho, prior_sd, data, ln_Z } of expected) {
    const all = Array.from({ length: D }, (_, i) => i);
    const { ln } = evidence({
      observed: data,
      variance: data.map(() => 1),
      linear: all.map(() => Z),
      design: all.map((i) => all.map((k) => (i === k ? prior_sd : 0))),
      rows: { groups: [correlated(D, rho)] },
    });
    expect(relative(ln, ln_Z)).toBeLessThan(1e-12);
  }
});

test("evidence.correlated_gaussian: levels in a box, coupled by their readings' correlations", () => {
  const { expected } = record<{ D: number; rho: number; ln_Z: number }[]>(
    "evidence.correlated_gaussian",
  );
  for (const { D, rho, ln_Z } of expected) {
    const all = Array.from({ length: D }, (_, i) => i);
    const { ln } = evidence({
      observed: all.map(() => 0),
      variance: all.map(() => 1),
      linear: all.map(() => ({ kind: "flat", lower: -10, upper: 10, width: 20 })),
      design: all.map((i) => all.map((k) => (i === k ? 1 : 0))),
      rows: { groups: [correlated(D, rho)] },
    });
    expect(Math.abs(ln - ln_Z)).toBeLessThan(1e-9);
  }
});

function correlated(size: number, rho: number) {
  const covariance = Float64Array.from({ length: size * size }, (_, n) =>
    n % (size + 1) === 0 ? 1 : rho,
  );
  return { rows: Int32Array.from({ length: size }, (_, i) => i), covariance };
}

test("evidence.unnormalised_gaussian: one and two dimensions by quadrature, ten by sampling", () => {
  const { expected } = record<{ D: number; ln_Z: number }[]>("evidence.unnormalised_gaussian");
  for (const { D, ln_Z } of expected) {
    if (D > 10) continue;
    const { ln, error } = overBox(D, [-10, 10], (values) => {
      let sum = 0;
      for (const value of values) sum += value * value;
      return -sum / 2;
    });
    expect(Math.abs(ln - ln_Z)).toBeLessThan(D === 1 ? 1e-9 : D === 2 ? 1e-6 : 3 * error);
    if (D > 3) expect(error).toBeLessThan(0.1);
  }
});

test("evidence.eggbox: eighteen peaks on a square", () => {
  const { expected } = record<{ ln_Z: number }>("evidence.eggbox");
  const { ln } = overBox(
    2,
    [0, 10 * Math.PI],
    ([a, b]) => (2 + Math.cos(a! / 2) * Math.cos(b! / 2)) ** 5,
  );
  expect(Math.abs(ln - expected.ln_Z)).toBeLessThan(1e-6);
});

test("evidence.gaussian_shells: two thin shells, by cubature and by sampling", () => {
  const { expected } = record<{ D: number; ln_Z: number }[]>("evidence.gaussian_shells");
  const shell = (values: Float64Array, centre: number) => {
    let squares = (values[0]! - centre) ** 2;
    for (let k = 1; k < values.length; k += 1) squares += values[k]! ** 2;
    return (Math.sqrt(squares) - 2) ** 2 / (2 * 0.01);
  };
  for (const { D, ln_Z } of expected) {
    if (D > 5) continue;
    const { ln, error } = overBox(D, [-6, 6], (values) => {
      const [one, other] = [-shell(values, 3.5), -shell(values, -3.5)];
      const most = Math.max(one, other);
      const sum = Math.exp(one - most) + Math.exp(other - most);
      return most + Math.log(sum) - Math.log(2 * Math.PI * 0.01) / 2;
    });
    // The record's own figure leaves out the prior's edge: less than 3e-7.
    expect(Math.abs(ln - ln_Z)).toBeLessThan(D === 2 ? 2e-6 : 3 * error);
  }
});

describe("a chance of 1/2 against one that is flat", () => {
  const lnBinomial = (n: number, k: number) => {
    let ln = 0;
    for (let i = 1; i <= k; i += 1) ln += Math.log((n - k + i) / i);
    return ln;
  };
  const flatChance = (n: number, k: number) => {
    const { ln } = overBox(1, [0, 1], ([q]) => k * Math.log(q!) + (n - k) * Math.log1p(-q!));
    return lnBinomial(n, k) + ln;
  };

  test("bf.binomial_115_200", () => {
    const { expected } = record<{ L_M1: number; L_M2: number; ln_K: number }>(
      "bf.binomial_115_200",
    );
    const ln = flatChance(200, 115);
    expect(Math.abs(ln - Math.log(expected.L_M2))).toBeLessThan(1e-9);
    expect(Math.abs(lnBinomial(200, 115) + 200 * Math.log(0.5) - ln - expected.ln_K)).toBeLessThan(
      1e-9,
    );
  });

  test("bf.lindley_births", () => {
    const { inputs, expected } = record<{ L1: number }, { n: number; k: number }>(
      "bf.lindley_births",
    );
    expect(Math.abs(flatChance(inputs.n, inputs.k) - Math.log(expected.L1))).toBeLessThan(1e-8);
  });
});

test("censored.normal_upper_limits: values and upper limits against one level", () => {
  const { expected } = record<
    { mu: number; sigma: number; detections: number[]; upper_limits: number[]; ln_L: number }[]
  >("censored.normal_upper_limits");
  for (const { mu, sigma, detections, upper_limits, ln_L } of expected) {
    const { ln, error } = evidence({
      observed: [...detections, ...upper_limits],
      variance: [...detections, ...upper_limits].map(() => sigma * sigma),
      kind: [...detections.map(() => NORMAL), ...upper_limits.map(() => FACTOR)],
      rows: {
        factors: [
          ...detections.map(() => null),
          ...upper_limits.map((limit) => censoredFactor({ limit, sd: sigma, side: 1, extra: 0 })),
        ],
      },
      evaluate: (_outer, _scenario, { base }) => {
        base.fill(mu);
        return true;
      },
    });
    expect(relative(ln, ln_L)).toBeLessThan(1e-12);
    expect(error).toBe(0);
  }
});
