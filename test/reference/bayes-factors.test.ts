import { describe, expect, test } from "vitest";
import { kassRaftery } from "@weighhouse/engine/kass-raftery";
import { oneMeasurand, standingsFor } from "./campaigns";
import { record, relative } from "./records";

/** ln of the Bayes factor of an exact prediction against the measurand's reference. */
function lnAgainstReference(options: Parameters<typeof oneMeasurand>[0]): number {
  const { hypotheses, noModel } = oneMeasurand(options);
  return hypotheses[0]!.lnEvidence! - noModel.lnEvidence!;
}

test("words for a Bayes factor are those of the log10 table (bf.kass_raftery_log10)", () => {
  const { expected } = record<{ bounds: number[]; labels: string[] }>("bf.kass_raftery_log10");
  expected.bounds.forEach((bound, i) => {
    expect(expected.labels[i]).toContain(kassRaftery(bound));
    expect(expected.labels[i]).toContain(kassRaftery(-bound - 0.1));
  });
});

describe("a point against a normal reference", () => {
  test("gives Berger & Sellke's posterior probabilities (from memory, recomputed)", () => {
    const { expected } = record<
      { z: number; n: number; printed_P_H0: number; BF01: number; P_H0: number }[]
    >("bf.point_vs_normal.berger_sellke");
    for (const { z, n, BF01, P_H0, printed_P_H0 } of expected) {
      const one = { value: z / Math.sqrt(n), sd: 1 / Math.sqrt(n) };
      const options = {
        reference: { family: "normal", mean: 0, sd: 1 },
        predictions: { point: { expected: 0 } },
      };
      const ln = lnAgainstReference({ ...options, data: [one] });
      expect(relative(Math.exp(ln), BF01)).toBeLessThan(1e-11);
      // n readings of sd 1 with that mean say the same.
      const many = Array.from({ length: n }, () => ({ value: one.value, sd: 1 }));
      expect(Math.abs(lnAgainstReference({ ...options, data: many }) - ln)).toBeLessThan(1e-9);
      const { hypotheses } = oneMeasurand({ ...options, data: [one], weight: 1 });
      const { posterior } = hypotheses.find(({ key }) => key === "point")!;
      expect(relative(posterior, P_H0)).toBeLessThan(1e-11);
      expect(Math.abs(posterior - printed_P_H0)).toBeLessThan(0.0051);
    }
  });

  test("gives the Savage-Dickey ratio (bf.savage_dickey_normal_mean)", () => {
    const { expected } = record<
      { xbar: number; n: number; sigma: number; prior_sd: number; mu0: number; ln_BF01: number }[]
    >("bf.savage_dickey_normal_mean");
    for (const { xbar, n, sigma, prior_sd, mu0, ln_BF01 } of expected) {
      const ln = lnAgainstReference({
        reference: { family: "normal", mean: mu0, sd: prior_sd },
        predictions: { point: { expected: mu0 } },
        data: [{ value: xbar, sd: sigma / Math.sqrt(n) }],
      });
      expect(relative(ln, ln_BF01)).toBeLessThan(1e-11);
    }
  });
});

describe("evidence of silence", () => {
  test("under a uniform reference (evidence.normal_uniform)", () => {
    const { expected } =
      record<{ x: number; sigma: number; prior: number[]; ln_Z: number }[]>(
        "evidence.normal_uniform",
      );
    for (const { x, sigma, prior, ln_Z } of expected) {
      const { noModel } = oneMeasurand({
        reference: { family: "uniform", lower: prior[0]!, upper: prior[1]! },
        data: [{ value: x, sd: sigma }],
      });
      expect(relative(noModel.lnEvidence!, ln_Z)).toBeLessThan(1e-11);
    }
  });

  test("of correlated measurements of several measurands (evidence.gaussian_gaussian)", () => {
    const { expected } = record<
      { D: number; rho: number; prior_sd: number; data: number[]; ln_Z: number }[]
    >("evidence.gaussian_gaussian");
    for (const { rho, prior_sd, data, ln_Z } of expected) {
      const keys = data.map((_, i) => `m${i}`);
      const { noModel } = standingsFor({
        format: "weighhouse-campaign/1",
        campaign: { key: "several", title: "Several" },
        observables: [{ key: "o", title: "O", unit: "m", scale: "linear" }],
        measurands: keys.map((key) => ({
          key,
          observable: "o",
          reference: { family: "normal", mean: 0, sd: prior_sd },
        })),
        sharedErrors: [{ key: "common", sd: Math.sqrt(rho) }],
        measurements: data.map((value, i) => ({
          id: `d${i}`,
          measurand: keys[i],
          value,
          sd: Math.sqrt(1 - rho),
          shared: [{ error: "common" }],
        })),
      });
      expect(relative(noModel.lnEvidence!, ln_Z)).toBeLessThan(1e-11);
    }
  });
});
