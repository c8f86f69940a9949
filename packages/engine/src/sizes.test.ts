import { describe, expect, test } from "vitest";
import { readCampaign } from "@weighhouse/campaign/read";
import { scoreCampaign } from "./score";
import { documentFrom, standingsFrom } from "./testing/documents";

type Part = Record<string, unknown>;

const observables = [
  { key: "o", title: "O", unit: "m", scale: "linear" },
  { key: "l", title: "L", unit: "m", scale: "log10" },
];
const LN_SQRT_2PI = Math.log(2 * Math.PI) / 2;

function noModel(measurands: Part[], measurements: Part[], more: Part = {}) {
  return standingsFrom(documentFrom({ observables, measurands, measurements, ...more })).noModel
    .lnEvidence!;
}

describe("a reference so narrow that seen from the data its bounds are one number", () => {
  const narrow = { family: "uniform", lower: 0, upper: 1e-18 };
  const x = { key: "x", observable: "o", reference: narrow };

  // The level is 0 to all digits: the density of a normal, -(4.8 / 0.3)^2 / 2 - ln(0.3 sqrt(2 pi)).
  const one = -((4.8 / 0.3) ** 2) / 2 - Math.log(0.3) - LN_SQRT_2PI;

  test("is scored as the one level that it is", () => {
    const measurements = [{ id: "a", measurand: "x", value: 4.8, sd: 0.3 }];
    expect(noModel([x], measurements)).toBeCloseTo(one, 10);
    const least = { ...x, reference: { ...narrow, upper: Number.MIN_VALUE } };
    expect(noModel([least], measurements)).toBeCloseTo(one, 10);
    const mirrored = [{ id: "a", measurand: "x", value: -4.8, sd: 0.3 }];
    expect(noModel([x], mirrored)).toBeCloseTo(one, 10);
  });

  test("also where a shared error couples two to five of them", () => {
    // Given the levels y ~ N(0, s^2 I + u^2 J), whose determinant and inverse are plain formulas.
    for (const n of [2, 3, 4, 5]) {
      const keys = Array.from({ length: n }, (_, i) => `x${i}`);
      const values = keys.map((_, i) => 1 + 0.1 * i);
      const found = noModel(
        keys.map((key) => ({ ...x, key })),
        keys.map((key, i) => ({
          id: key,
          measurand: key,
          value: values[i],
          sd: 0.3,
          shared: [{ error: "e" }],
        })),
        { sharedErrors: [{ key: "e", sd: 0.2 }] },
      );
      const [s2, u2] = [0.09, 0.04];
      const sum = values.reduce((total, y) => total + y, 0);
      const squares = values.reduce((total, y) => total + y * y, 0);
      const quadratic = (squares - (u2 * sum * sum) / (s2 + n * u2)) / s2;
      const logDeterminant = (n - 1) * Math.log(s2) + Math.log(s2 + n * u2);
      expect(found).toBeCloseTo(-(quadratic + logDeterminant) / 2 - n * LN_SQRT_2PI, 8);
    }
  });

  test("on log10, where both logarithms are one number", () => {
    const reference = { family: "uniform", lower: 1, upper: 1 + Number.EPSILON };
    const found = noModel(
      [{ key: "x", observable: "l", reference }],
      [{ id: "a", measurand: "x", value: 10, sdDex: 0.5 }],
    );
    expect(found).toBeCloseTo(-2 - Math.log(0.5) - LN_SQRT_2PI, 10);
  });
});

describe("what can't be squared is refused at its place", () => {
  const reference = { family: "normal", mean: 3, sd: 1 };
  const x = { key: "x", observable: "o", reference };
  const measurement = { id: "a", measurand: "x", value: 3, sd: 1, shared: [{ error: "e" }] };
  const e = { key: "e", sd: 0.1 };
  const prediction = { measurand: "x", expected: 3, tolerance: { family: "normal", sd: 1e200 } };
  test.each<[string, Part]>([
    ["/measurands/0/scatter", { measurands: [{ ...x, scatter: 1e155 }] }],
    [
      "/measurands/0/reference/scatter",
      { measurands: [{ ...x, reference: { ...reference, scatter: 1e308 } }] },
    ],
    [
      "/measurands/0/reference/sd",
      { measurands: [{ ...x, reference: { ...reference, sd: 1e200 } }] },
    ],
    ["/sharedErrors/0/sd", { sharedErrors: [{ ...e, sd: 1e300 }] }],
    [
      "/measurements/0/shared/0/coefficient",
      { measurements: [{ ...measurement, shared: [{ error: "e", coefficient: -1e200 }] }] },
    ],
    [
      "/hypotheses/0/predictions/0/tolerance/sd",
      { hypotheses: [{ key: "h", title: "H", predictions: [prediction] }] },
    ],
  ])("%s", (pointer, parts) => {
    const read = readCampaign({
      format: "weighhouse-campaign/1",
      campaign: { key: "k", title: "K" },
      observables,
      measurands: [x],
      sharedErrors: [e],
      measurements: [measurement],
      ...parts,
    });
    const scored = read.ok ? scoreCampaign(read.value) : read;
    const problems = scored.ok ? [] : scored.problems;
    expect(problems.map((one) => [one.pointer, one.code])).toEqual([[pointer, "out-of-range"]]);
  });
});

test("an interval's end beyond all doubles is unbounded", () => {
  const { verdicts } = standingsFrom(
    documentFrom({
      observables,
      measurands: [
        { key: "x", observable: "l", reference: { family: "uniform", lower: 1, upper: 9 } },
      ],
      hypotheses: [
        {
          key: "h",
          title: "H",
          predictions: [{ measurand: "x", expected: 3, tolerance: { family: "normal", sd: 400 } }],
        },
      ],
    }),
  );
  expect([verdicts[0]!.lower, verdicts[0]!.upper]).toEqual([0, null]);
});

test.each([
  ["a gamma too narrow to be told from a number", { family: "gamma", mean: 3, sd: 1e-9 }],
  ["a gamma that is nearly all at 0", { family: "gamma", mean: 3, sd: 1e9 }],
])("%s is refused at its sd", (_, tolerance) => {
  const document = documentFrom({
    observables: [{ key: "o", title: "O", unit: "1", scale: "count" }],
    measurands: [{ key: "x", observable: "o", reference: { ...tolerance, sd: 3 } }],
    hypotheses: [{ key: "h", title: "H", predictions: [{ measurand: "x", tolerance }] }],
  });
  const refused = scoreCampaign(document);
  expect(refused.ok ? [] : refused.problems.map(({ pointer }) => pointer)).toEqual([
    "/hypotheses/0/predictions/0/tolerance/sd",
  ]);
});

test.each([
  ["sd", { family: "normal", mean: 0, sd: 1e150 }],
  ["sd", { family: "halfnormal", sd: 1e150 }],
  ["sdLog10", { family: "lognormal", median: 1, sdLog10: 9 }],
  ["upper", { family: "uniform", lower: 0, upper: 1e150 }],
  ["lower", { family: "loguniform", lower: 1e-150, upper: 1 }],
])("a prior beyond ordinary numbers is refused at its %s", (field, prior) => {
  const document = documentFrom({
    observables: [{ key: "o", title: "O", unit: "m", scale: "linear" }],
    measurands: [
      { key: "x", observable: "o", reference: { family: "uniform", lower: 0, upper: 9 } },
    ],
    hypotheses: [
      {
        key: "h",
        title: "H",
        parameters: [{ key: "q", prior }],
        predictions: [{ measurand: "x", expected: "q" }],
      },
    ],
  });
  const refused = scoreCampaign(document);
  expect(refused.ok ? [] : refused.problems.map(({ pointer }) => pointer)).toEqual([
    `/hypotheses/0/parameters/0/prior/${field}`,
  ]);
});
