import { describe, expect, test } from "vitest";
import { blockProblem, denseNormal, randomNumbers } from "../testing/block-problems";
import { blockEvidence } from "./evidence";
import { blockFit } from "./fit";
import type { LinearUnknown } from "./problem";

// Plain computations written out here: N(y; f, D + WW') by a dense Cholesky.
const NORMAL_UNKNOWN: LinearUnknown = { kind: "normal" };

describe("with all Gaussian, ln Z is ln N(y; f, D + WW') and the fit is r' (D + WW')^-1 r", () => {
  for (let seed = 1; seed <= 20; seed += 1) {
    test(`random block ${seed}`, () => {
      const random = randomNumbers(seed);
      const n = 3 + Math.floor(random() * 25);
      const k = Math.floor(random() * 6);
      const observed = Array.from({ length: n }, () => 4 * random() - 2);
      const variance = Array.from({ length: n }, () => 10 ** (4 * random() - 4));
      const design = observed.map(() =>
        Array.from({ length: k }, () => (random() < 0.5 ? 0 : 2 * random() - 1)),
      );
      const rho = k > 2 ? [{ first: 0, second: 2, value: random() - 0.5 }] : [];
      const groups = n > 8 ? [groupOf([1, 4, 7], random)] : [];
      const smooth =
        seed % 2 === 0 && n > 14
          ? [processOf([2, 9, 10, 11, 12, seed % 4 === 0 ? 4 : 13], random)]
          : [];
      const covariance = observed.map((_, i) =>
        observed.map((__, j) => {
          let value = i === j ? variance[i]! : 0;
          for (const { rows, covariance: c } of groups) {
            const [a, b] = [rows.indexOf(i), rows.indexOf(j)];
            if (a >= 0 && b >= 0) value = c[a * rows.length + b]!;
          }
          for (const { rows, x, sd, length } of smooth) {
            const [a, b] = [rows.indexOf(i), rows.indexOf(j)];
            if (a >= 0 && b >= 0) value += sd ** 2 * Math.exp(-Math.abs(x[a]! - x[b]!) / length);
          }
          for (let p = 0; p < k; p += 1) {
            for (let q = 0; q < k; q += 1) {
              const tied = rho.find((one) => one.first + one.second === p + q && p !== q);
              const same = p === q ? 1 : tied && (p === 0 || q === 0) ? tied.value : 0;
              value += design[i]![p]! * design[j]![q]! * same;
            }
          }
          return value;
        }),
      );
      const problem = blockProblem({
        observed,
        variance,
        design,
        linear: Array.from({ length: k }, () => NORMAL_UNKNOWN),
        correlations: rho,
        rows: { groups, smooth },
      });
      const expected = denseNormal(observed, covariance);
      const evidence = blockEvidence(problem);
      const fit = blockFit(problem);
      if (!evidence.ok || fit === null || !fit.ok) throw new Error("refused");
      expect(Math.abs(evidence.ln / expected.ln - 1)).toBeLessThan(1e-10);
      expect(Math.abs(fit.chiSquare / expected.chiSquare - 1)).toBeLessThan(1e-10);
    });
  }
});

function groupOf(rows: number[], random: () => number) {
  const c = [0.5 + random(), 0.3, -0.2, 0.3, 0.9, 0.1, -0.2, 0.1, 0.4];
  return { rows: Int32Array.from(rows), covariance: Float64Array.from(c) };
}

function processOf(rows: number[], random: () => number) {
  const x = Float64Array.from(rows, () => random());
  return { rows: Int32Array.from(rows), x, sd: 0.7, length: 0.1 + random() };
}
