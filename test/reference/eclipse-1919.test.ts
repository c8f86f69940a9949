import { describe, expect, test } from "vitest";
import campaign from "./campaigns/eclipse-1919.json";
import published from "./campaigns/eclipse-1919.expected.json";
import { oneMeasurand, standingsFor } from "./campaigns";
import { record, relative } from "./records";

describe("the 1919 eclipse campaign", () => {
  const standings = standingsFor(campaign);

  test("has the expected standings to 1e-9", () => {
    for (const [key, wanted] of Object.entries(published.hypotheses)) {
      const found = standings.hypotheses.find((one) => one.key === key)!;
      for (const field of [
        "chiSquare",
        "pValue",
        "lnEvidence",
        "log10BayesFactor",
        "posterior",
      ] as const) {
        expect(relative(found[field]!, wanted[field]), `${key} ${field}`).toBeLessThan(1e-9);
      }
      expect(found.degreesOfFreedom).toBe(wanted.degreesOfFreedom);
    }
    expect(standings.hypotheses.map(({ key }) => key)).toEqual(["full", "half", "none"]);
  });

  test("has the expected combination and verdicts", () => {
    const { combined } = standings.measurands[0]!;
    expect(relative(combined!.value, published.combined.value)).toBeLessThan(1e-9);
    expect(relative(combined!.sd, published.combined.sd)).toBeLessThan(1e-9);
    const verdicts = standings.verdicts.map(({ hypothesis, verdict }) => [hypothesis, verdict]);
    expect(Object.fromEntries(verdicts)).toEqual(published.verdicts);
    expect(standings.warnings).toEqual([]);
  });
});

interface Inputs {
  data: { value: number; sigma: number }[];
  hypotheses: Record<string, number>;
}
type PerHypothesis = Record<string, { chi2: number; dof: number; p: number; ln_evidence: number }>;
interface Rest {
  bayes: Record<string, number>;
  weighted_mean: { mean: number; sigma: number; chi2: number; birge_ratio: number | null };
  "free_deflection_U(0,3)": { ln_evidence: number };
}

// Dyson, Eddington & Davidson (1920); recomputed with mpmath at 40 digits.
describe.each([
  "eclipse1919.two_instruments",
  "eclipse1919.two_instruments_exact_PE",
  "eclipse1919.sobral_4inch_only",
  "eclipse1919.principe_only",
])("record %s", (id) => {
  const { inputs, expected } = record<PerHypothesis & Rest, Inputs>(id);
  const named = new Map(
    Object.entries(inputs.hypotheses).map(([k, v]) => [k.replace("_", "-"), v]),
  );
  const standings = oneMeasurand({
    reference: { family: "uniform", lower: 0, upper: 3 },
    predictions: Object.fromEntries([...named].map(([key, value]) => [key, { expected: value }])),
    data: inputs.data.map(({ value, sigma }) => ({ value, sd: sigma })),
  });

  test("chi-square, p and evidence of every hypothesis", () => {
    for (const key of Object.keys(inputs.hypotheses)) {
      const found = standings.hypotheses.find((one) => one.key === key.replace("_", "-"))!;
      const wanted = (expected as PerHypothesis)[key]!;
      expect(relative(found.chiSquare!, wanted.chi2)).toBeLessThan(1e-10);
      expect(found.degreesOfFreedom).toBe(wanted.dof);
      expect(relative(found.pValue!, wanted.p)).toBeLessThan(1e-10);
      expect(relative(found.lnEvidence!, wanted.ln_evidence)).toBeLessThan(1e-10);
    }
  });

  test("Bayes factors, weighted mean, and the evidence of a free deflection", () => {
    const pair = standings.pairs.find(({ a, b }) => a === "einstein" && b === "newtonian")!;
    const wanted = expected.bayes["log10_BF_einstein_vs_newtonian"]!;
    expect(relative(pair.log10BayesFactor!, wanted)).toBeLessThan(1e-10);
    const { combined } = standings.measurands[0]!;
    expect(relative(combined!.value, expected.weighted_mean.mean)).toBeLessThan(1e-10);
    expect(relative(combined!.sd, expected.weighted_mean.sigma)).toBeLessThan(1e-10);
    if (expected.weighted_mean.birge_ratio === null) {
      expect(combined!.birgeRatio).toBeNull();
      expect(combined!.chiSquare).toBe(0);
    } else {
      expect(relative(combined!.chiSquare!, expected.weighted_mean.chi2)).toBeLessThan(1e-9);
      const birge = combined!.birgeRatio!;
      expect(relative(birge, expected.weighted_mean.birge_ratio)).toBeLessThan(1e-9);
    }
    const free = expected["free_deflection_U(0,3)"].ln_evidence;
    expect(relative(standings.noModel.lnEvidence!, free)).toBeLessThan(1e-10);
  });
});
