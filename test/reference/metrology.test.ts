import { describe, expect, test } from "vitest";
import { oneMeasurand } from "./campaigns";
import { record, relative } from "./records";

interface Combined {
  mean: number;
  u: number;
  chi2: number;
  dof: number;
  birge_ratio: number;
  u_scaled: number;
}

// Sets of determinations as published (see each record's source and status); combinations
// recomputed with mpmath.
describe.each([
  ["discrepant.G_2018", true],
  ["discrepant.G_2014", true],
  ["discrepant.G_2010", true],
  ["pdg.charged_kaon_mass", true],
  ["discrepant.two_values", true],
  ["consistent.planck_3", false],
  ["consistent.planck_18", false],
] as const)("%s", (id, disagrees) => {
  const { inputs, expected } = record<Combined, { data: { value: number; u: number }[] }>(id);
  const { mean, u } = expected;
  const standings = oneMeasurand({
    reference: { family: "uniform", lower: mean - 1e6 * u, upper: mean + 1e6 * u },
    predictions: { near: { expected: mean, tolerance: { family: "normal", sd: 100 * u } } },
    data: inputs.data.map((one) => ({ value: one.value, sd: one.u })),
  });

  test("mean, uncertainty, chi-square and Birge ratio", () => {
    const combined = standings.measurands[0]!.combined!;
    expect(relative(combined.value, mean)).toBeLessThan(1e-12);
    expect(relative(combined.sd, u)).toBeLessThan(1e-9);
    // A value's last bit, in its own uncertainties, moves chi-square by about as much.
    const finest = Math.min(...inputs.data.map((one) => one.u));
    const allowed = Math.max(1e-9, (4 * Number.EPSILON * mean) / finest);
    expect(relative(combined.chiSquare!, expected.chi2)).toBeLessThan(allowed);
    expect(combined.degreesOfFreedom).toBe(expected.dof);
    expect(relative(combined.birgeRatio!, expected.birge_ratio)).toBeLessThan(allowed);
  });

  test("disagreement is said, and widens the verdict's uncertainty by the Birge ratio", () => {
    const codes = standings.warnings.map(({ code }) => code);
    expect(codes.includes("disagreeing-measurements")).toBe(disagrees);
    const row = standings.verdicts[0]!;
    expect(row.inflated).toBe(disagrees);
    expect(relative(row.sd!, disagrees ? expected.u_scaled : u)).toBeLessThan(1e-9);
    expect(row.value).toBe(standings.measurands[0]!.combined!.value);
  });
});

test("conformance with a two-sided tolerance is JCGM 106's (jcgm106.pc_two_sided)", () => {
  const { expected } =
    record<{ TL: number; TU: number; y: number; u: number; pc: number }[]>("jcgm106.pc_two_sided");
  for (const { TL, TU, y, u, pc } of expected) {
    // The interval is expected -+ 2 sd.
    const tolerance = { family: "normal", sd: (TU - TL) / 4 };
    const { verdicts } = oneMeasurand({
      reference: { family: "uniform", lower: TL - 10, upper: TU + 10 },
      predictions: { within: { expected: (TL + TU) / 2, tolerance } },
      data: [{ value: y, sd: u }],
    });
    const row = verdicts[0]!;
    expect(relative(row.conformance!, pc)).toBeLessThan(1e-11);
    expect(row.verdict).toBe(pc >= 0.95 ? "pass" : "undecided");
    expect([row.lower, row.upper].map((bound) => Number(bound!.toFixed(9)))).toEqual([TL, TU]);
  }
});
