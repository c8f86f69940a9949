import { describe, expect, test } from "vitest";
import { readCampaign } from "@weighhouse/campaign/read";
import { openWorkspace } from "@weighhouse/engine/open-workspace";
import { createState } from "@weighhouse/engine/state";
import { standingsFor } from "./campaigns";
import { record, relative } from "./records";

type Part = Record<string, unknown>;

const wide = { family: "uniform", lower: -1e12, upper: 1e12 };

/** Keys are small letters, figures and hyphens. */
const keyOf = (name: string) => name.toLowerCase().replaceAll("_", "-");

/** A campaign of one derived value `y`, predicted within bounds where some are given. */
function derivedFrom(
  expression: string,
  inputs: Record<string, { reference?: Part; measurements: Part[] }>,
  { bounds, more = {} }: { bounds?: [number, number]; more?: Part } = {},
): Part {
  const names = Object.keys(inputs);
  const predictions = bounds
    ? [
        {
          measurand: "y",
          tolerance: { family: "interval", lower: bounds[0], upper: bounds[1] },
        },
      ]
    : [];
  return {
    format: "weighhouse-campaign/1",
    campaign: { key: "propagated", title: "Propagated" },
    observables: [{ key: "o", title: "O", unit: "1", scale: "linear" }],
    measurands: names.map((name) => ({
      key: keyOf(name),
      observable: "o",
      reference: inputs[name]!.reference ?? wide,
    })),
    derived: [
      {
        key: "y",
        observable: "o",
        expression,
        from: Object.fromEntries(names.map((name) => [name, keyOf(name)])),
        reference: wide,
      },
    ],
    hypotheses: [{ key: "h", title: "H", predictions }],
    measurements: names.flatMap((name) =>
      inputs[name]!.measurements.map((one, i) => ({
        id: `${name}${i}`,
        measurand: keyOf(name),
        ...one,
      })),
    ),
    ...more,
  };
}

const known = (value: number, sd: number) => ({ measurements: [{ value, sd }] });

/** Names in expressions begin with a small letter. */
const small = (name: string) => name[0]!.toLowerCase() + name.slice(1);

/** Known by its reference alone: a limit that nothing comes near. */
const spread = (lower: number, upper: number) => ({
  reference: { family: "uniform", lower, upper },
  measurements: [{ limit: "upper", value: upper + 1e3 * (upper - lower), sd: upper - lower }],
});

function combinedOf(document: Part) {
  const { measurands, verdicts } = standingsFor(document);
  const found = measurands.find(({ key }) => key === "y")!.combined!;
  return { ...found, conformance: verdicts[0]?.conformance ?? null };
}

describe("GUM (JCGM 100:2008)", () => {
  test("H.1, the end gauge: first order, since products of zero means don't shift the mean", () => {
    const { inputs, expected } = record<
      { l_mm: number; u_c_nm_unrounded: number; u_c_nm_printed: number },
      Record<string, number[]>
    >("gum.H1");
    const input = (key: string) => known(inputs[key]![0]!, inputs[key]![1]!);
    const { value, sd } = combinedOf(
      derivedFrom("lS + d - lS * (dalpha * theta + alphaS * dtheta)", {
        lS: input("lS"),
        d: input("d"),
        alphaS: input("alphaS"),
        theta: input("theta"),
        dalpha: input("dalpha"),
        dtheta: input("dtheta"),
      }),
    );
    expect(value).toBeCloseTo(expected.l_mm, 9);
    expect(relative(sd * 1e6, expected.u_c_nm_unrounded)).toBeLessThan(1e-9);
    expect(Math.round(sd * 1e6)).toBe(expected.u_c_nm_printed);
  });

  test("H.2, resistance and reactance: correlated inputs, and correlated results", () => {
    const { inputs, expected } = record<
      {
        means: number[];
        u_means: number[];
        r_VI_Vphi_Iphi: number[];
        R: number;
        X: number;
        Z: number;
        u_R_X_Z: number[];
        r_RX_RZ_XZ: number[];
        printed: { R: number[]; X: number[]; Z: number[]; r_outputs: number[] };
      },
      { V_volt: number[] }
    >("gum.H2");
    expect(inputs.V_volt).toHaveLength(5);
    const { means, u_means: u, r_VI_Vphi_Iphi: r } = expected;
    const document = {
      ...derivedFrom("v / i * cos(phi)", {
        v: known(means[0]!, u[0]!),
        i: known(means[1]!, u[1]!),
        phi: known(means[2]!, u[2]!),
      }),
      correlations: [
        { a: "v0", b: "i0", coefficient: r[0] },
        { a: "v0", b: "phi0", coefficient: r[1] },
        { a: "i0", b: "phi0", coefficient: r[2] },
      ],
      derived: [
        ["y", "v / i * cos(phi)"],
        ["reactance", "v / i * sin(phi)"],
        ["impedance", "v / i + 0 * phi"],
      ].map(([key, expression]) => ({
        key,
        observable: "o",
        expression,
        from: { v: "v", i: "i", phi: "phi" },
        reference: wide,
        // Impedance is a function of the other two: as evidence the three would be one too many.
        scored: false,
      })),
    };
    const { measurands } = standingsFor(document);
    const found = ["y", "reactance", "impedance"].map(
      (key) => measurands.find((one) => one.key === key)!.combined!,
    );
    const results = [expected.R, expected.X, expected.Z];
    const printed = [expected.printed.R, expected.printed.X, expected.printed.Z];
    found.forEach(({ value, sd }, k) => {
      expect(relative(value, results[k]!)).toBeLessThan(1e-12);
      // u of the means is carried to some 16 digits, their correlations too.
      expect(relative(sd, expected.u_R_X_Z[k]!)).toBeLessThan(1e-9);
      expect(Math.abs(value - printed[k]![0]!)).toBeLessThan(1e-3);
      // The print of u(X), 0.295, is off in its last digit: it recomputes to 0.2956.
      expect(Math.abs(sd - printed[k]![1]!)).toBeLessThan(1e-3);
    });
    const read = readCampaign(document);
    const state = read.ok ? createState(read.value) : read;
    if (!state.ok) throw new Error(JSON.stringify(state.problems));
    const { covariance: c } = openWorkspace(state.value).derived;
    const correlations = [c[1]!, c[2]!, c[5]!].map((value, k) => {
      const [i, j] = [
        [0, 1],
        [0, 2],
        [1, 2],
      ][k] as [number, number];
      return value / Math.sqrt(c[4 * i]! * c[4 * j]!);
    });
    correlations.forEach((value, k) => {
      expect(relative(value, expected.r_RX_RZ_XZ[k]!)).toBeLessThan(1e-7);
      expect(Math.abs(value - expected.printed.r_outputs[k]!)).toBeLessThan(1e-3);
    });
  });
});

describe("JCGM 101:2008", () => {
  const sum = "x1 + x2 + x3 + x4";

  test("9.2.2, a sum of four normals: u = 2, 95 % within 3.92", () => {
    const { expected } = record<{ u: number; normal_95: number }>("jcgm101.9.2");
    const inputs = { x1: known(0, 1), x2: known(0, 1), x3: known(0, 1), x4: known(0, 1) };
    const bounds: [number, number] = [-expected.normal_95, expected.normal_95];
    const { value, sd, conformance } = combinedOf(derivedFrom(sum, inputs, { bounds }));
    expect(value).toBe(0);
    expect(relative(sd, expected.u)).toBeLessThan(1e-12);
    expect(conformance).toBeCloseTo(0.95, 10);
  });

  test("9.2.3, a sum of four rectangular ones, by draws: 95 % within 3.8794", () => {
    const { expected } = record<{ rectangular_95_analytic: number }>("jcgm101.9.2");
    const half = Math.sqrt(3);
    const one = spread(-half, half);
    const limit = expected.rectangular_95_analytic;
    const { value, conformance } = combinedOf(
      derivedFrom(sum, { x1: one, x2: one, x3: one, x4: one }, { bounds: [-limit, limit] }),
    );
    // 131071 points: a probability is right to about 1e-4, and the median with it.
    expect(Math.abs(value)).toBeLessThan(2e-3);
    expect(Math.abs(conformance! - 0.95)).toBeLessThan(2e-4);
  });

  test("9.4, x1^2 + x2^2 about 0, where first order fails: 95 % in the shortest interval", () => {
    const { inputs, expected } = record<
      { x1: number; shortest_95: [number, number] }[],
      { u: number }
    >("jcgm101.9.4");
    for (const { x1, shortest_95: bounds } of expected) {
      const { conformance } = combinedOf(
        derivedFrom(
          "x1 ^ 2 + x2 ^ 2",
          { x1: known(x1, inputs.u), x2: known(0, inputs.u) },
          { bounds },
        ),
      );
      expect(Math.abs(conformance! - 0.95)).toBeLessThan(3e-4);
    }
    // At x1 = 0 the value is exponential of mean 2 u^2: its median is that times ln 2.
    const { value } = combinedOf(
      derivedFrom("x1 ^ 2 + x2 ^ 2", { x1: known(0, inputs.u), x2: known(0, inputs.u) }),
    );
    expect(relative(value, 2 * inputs.u ** 2 * Math.LN2)).toBeLessThan(1e-3);
  });

  test("the logarithm of a rectangular value (NPL DEM-ES-011, 9.2): its own quantiles", () => {
    const { expected } = record<{ shortest_95: [number, number] }>("propagate.log_uniform");
    const { value, sd, conformance } = combinedOf(
      derivedFrom("log(x)", { x: spread(0.1, 1.1) }, { bounds: expected.shortest_95 }),
    );
    expect(value).toBeCloseTo(Math.log(0.6), 4);
    expect(Math.abs(conformance! - 0.95)).toBeLessThan(1e-4);
    // Half the central 68.27 % interval, from the distribution function e^y - 0.1.
    const [low, high] = [0.15865525393145707, 0.8413447460685429].map((p) => Math.log(0.1 + p));
    expect(relative(sd, (high! - low!) / 2)).toBeLessThan(1e-4);
  });
});

describe("NIST", () => {
  test("TN 1900 E3, the viscometer: the curvature asks for draws, whose quantiles are the print's", () => {
    const { inputs, expected } = record<
      { mc_median: number; mc_95: [number, number]; first_order_u: number },
      Record<string, [number, number]>
    >("tn1900.E3");
    const names = ["muC", "tM", "tC", "rhoB", "rhoM", "rhoC"];
    const { value, sd, conformance } = combinedOf(
      derivedFrom(
        "muC * (rhoB - rhoM) / (rhoB - rhoC) * tM / tC",
        Object.fromEntries(names.map((name) => [name, known(...inputs[name]!)])),
        { bounds: expected.mc_95 },
      ),
    );
    // The record's quantiles are of a Monte Carlo run: its median to 0.02, its 95 % to 1e-3.
    expect(Math.abs(value - expected.mc_median)).toBeLessThan(0.02);
    expect(Math.abs(conformance! - 0.95)).toBeLessThan(2e-3);
    expect(sd).toBeGreaterThan(expected.first_order_u);
  });

  test("TN 1900 E2: 22 readings of equal uncertainty have their mean, and s / sqrt 22", () => {
    const { inputs, expected } = record<{ mean: number; s: number; u: number }, { t: number[] }>(
      "tn1900.E2",
    );
    const { measurands } = standingsFor({
      ...derivedFrom("x", {
        x: { measurements: inputs.t.map((value) => ({ value, sd: expected.s })) },
      }),
      derived: [],
    });
    const { value, sd, birgeRatio } = measurands[0]!.combined!;
    expect(relative(value, expected.mean)).toBeLessThan(1e-12);
    expect(relative(sd, expected.u)).toBeLessThan(1e-12);
    expect(birgeRatio).toBeCloseTo(1, 10);
  });

  test("thermal expansion, and the Stefan-Boltzmann constant (Uncertainty Machine manual)", () => {
    const expansion = record<
      { value: number; u_first_order: number },
      Record<string, [number, number]>
    >("nist_um.thermal_expansion");
    const from = (inputs: Record<string, [number, number]>, names: string[]) =>
      Object.fromEntries(names.map((name) => [small(name), known(...inputs[name]!)]));
    const found = combinedOf(
      derivedFrom("(l1 - l0) / (l0 * (t1 - t0))", from(expansion.inputs, ["L0", "L1", "T0", "T1"])),
    );
    expect(relative(found.value, expansion.expected.value)).toBeLessThan(1e-6);
    expect(relative(found.sd, expansion.expected.u_first_order)).toBeLessThan(1e-6);
    const stefan = record<{ value: number; u: number }, Record<string, [number, number]>>(
      "nist_um.stefan_boltzmann",
    );
    const sigma = combinedOf(
      derivedFrom(
        "32 * pi ^ 5 * h * r ^ 4 * rinf ^ 4 / (15 * ar_e ^ 4 * 0.001 ^ 4 * 299792458 ^ 6 * alpha ^ 8)",
        from(stefan.inputs, ["h", "R", "Rinf", "Ar_e", "alpha"]),
      ),
    );
    expect(relative(sigma.value, stefan.expected.value)).toBeLessThan(1e-6);
    expect(relative(sigma.sd, stefan.expected.u)).toBeLessThan(0.005);
  });
});
