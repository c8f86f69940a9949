import { describe, expect, test } from "vitest";
import { chanceOf } from "@weighhouse/engine/chance";
import {
  decisiveProbability,
  halfGainSd,
  informationGain,
} from "@weighhouse/engine/plan/information-gain";
import { jointGain } from "@weighhouse/engine/plan/joint-gain";
import { normalCdf } from "@weighhouse/numerics/normal";
import { record, relative } from "./records";

/** A normal predictive: what is expected, and how surely, before the reading's own noise. */
function normal(mean: number, sd = 0) {
  return { components: [{ weight: 1, mean, variance: sd * sd }], floor: 0, mean, sd };
}

const alike = (means: readonly number[]) =>
  means.map((mean) => ({ posterior: 1 / means.length, predictive: normal(mean) }));

describe("information gain of a reading (Lindley 1956; values by two quadratures in mpmath)", () => {
  test("of two equal Gaussians (eig.two_equal_gaussians)", () => {
    const { expected } =
      record<{ d_over_sigma: number; bits: number }[]>("eig.two_equal_gaussians");
    for (const { d_over_sigma, bits } of expected) {
      const gain = informationGain(alike([0, d_over_sigma]), 1);
      expect(Math.abs(gain - bits), `d = ${d_over_sigma}`).toBeLessThan(1e-11);
    }
  });

  test("of unequal weights and widths (eig.general)", () => {
    const { expected } =
      record<{ prior1: number; d: number; sigma1: number; sigma2: number; nats: number }[]>(
        "eig.general",
      );
    // The reading's own noise is half the narrower one's variance; the rest is the predictives'.
    for (const { prior1, d, sigma1, sigma2, nats } of expected) {
      const noise = Math.min(sigma1, sigma2) ** 2 / 2;
      const gain = informationGain(
        [
          { posterior: prior1, predictive: normal(0, Math.sqrt(sigma1 ** 2 - noise)) },
          { posterior: 1 - prior1, predictive: normal(d, Math.sqrt(sigma2 ** 2 - noise)) },
        ],
        Math.sqrt(noise),
      );
      expect(Math.abs(gain * Math.LN2 - nats)).toBeLessThan(1e-10);
    }
  });

  test("of three predictions, as for the eclipse (eig.eclipse_three)", () => {
    const { expected } =
      record<{ means: number[]; sigma: number; bits: number }[]>("eig.eclipse_three");
    for (const { means, sigma, bits } of expected) {
      expect(Math.abs(informationGain(alike(means), sigma) - bits)).toBeLessThan(1e-10);
    }
  });

  test("of a set of readings is that of one reading of their mean, where they say the same", () => {
    const { expected } =
      record<{ d_over_sigma: number; bits: number }[]>("eig.two_equal_gaussians");
    const of = (d: number) => expected.find(({ d_over_sigma }) => d_over_sigma === d)!.bits;
    // Four independent readings of sd 2 are one of sd 1.
    const four = (mean: number) => ({
      posterior: 0.5,
      mean: [mean, mean, mean, mean],
      covariance: [0, 1, 2, 3].map((i) => [0, 1, 2, 3].map((j) => (i === j ? 4 : 0))),
      outcomes: [],
    });
    for (const d of [0.5, 1, 1.5]) {
      expect(Math.abs(jointGain([four(0), four(d)]) - of(d))).toBeLessThan(1e-3);
    }
  });

  test("the noise that earns half of it: two alike, 1 bit without noise", () => {
    const sd = halfGainSd(alike([0, 1]))!;
    expect(Math.abs(informationGain(alike([0, 1]), sd) - 0.5)).toBeLessThan(1e-7);
    expect(halfGainSd(alike([1, 1]))).toBeNull();
  });
});

test("a reading decides where log10 B passes 1: of two Gaussians, a tail of the normal distribution", () => {
  // ln B = d y - d^2 / 2 of N(d, 1) against N(0, 1): |ln B| >= ln 10 beyond d / 2 -+ ln 10 / d.
  const d = 2;
  const [first, second] = [normal(d), normal(0)];
  const mixture = [
    { posterior: 0.5, predictive: first },
    { posterior: 0.5, predictive: second },
  ];
  const [below, above] = [d / 2 - Math.LN10 / d, d / 2 + Math.LN10 / d];
  const outside = (mean: number) => normalCdf(below - mean) + normalCdf(mean - above);
  const found = decisiveProbability(mixture, { first, second, log10B: 0, sd: 1 });
  expect(Math.abs(found - (outside(0) + outside(d)) / 2)).toBeLessThan(1e-12);
});

test("the bound on a Bayes factor against chance (Sellke, Bayarri & Berger 2001, from memory, recomputed)", () => {
  const { expected } = record<{ p: number; BF01_lower_bound: number }[]>("bf.sbb_bound");
  for (const { p, BF01_lower_bound } of expected) {
    expect(relative(1 / chanceOf(p, 1).bayesFactorBound!, BF01_lower_bound)).toBeLessThan(1e-12);
  }
  expect(chanceOf(0.5, 1).bayesFactorBound).toBeNull();
});

test("a p after the looks: Sidak's 1 - (1 - p)^n and Bonferroni's n p, also where p is tiny", () => {
  // 1 - 0.99^10 = 0.0956179249911955 (Sidak 1967; by hand).
  expect(relative(chanceOf(0.01, 10).sidak, 0.0956179249911955)).toBeLessThan(1e-14);
  expect(relative(chanceOf(1e-30, 1000).sidak, 1e-27)).toBeLessThan(1e-14);
  expect(chanceOf(0.01, 10).bonferroni).toBeCloseTo(0.1, 15);
  expect(chanceOf(0.5, 10).bonferroni).toBe(1);
});
