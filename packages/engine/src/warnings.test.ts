import { describe, expect, test } from "vitest";
import { scoreSilence } from "./hypothesis-scores";
import { createState } from "./state";
import { documentFrom, standingsFrom } from "./testing/documents";
import { warningsOf as allWarnings } from "./warnings";
import { createWorkspace } from "./create-workspace";

type Part = Record<string, unknown>;

const uniform = { family: "uniform", lower: 0, upper: 10 };
const gaussian = { family: "normal", mean: 5, sd: 1 };

function warningsOf({
  reference = uniform,
  predictions = [{}],
  values,
  ...more
}: {
  reference?: Part;
  predictions?: Part[];
  values: Part[];
  [part: string]: unknown;
}) {
  const { warnings } = standingsFrom(
    documentFrom({
      observables: [{ key: "o", title: "O", unit: "m", scale: "linear" }],
      measurands: [{ key: "x", observable: "o", reference }],
      hypotheses: predictions.map((prediction, h) => ({
        key: `h${h}`,
        title: "H",
        predictions: [{ measurand: "x", expected: 5, ...prediction }],
      })),
      measurements: values.map((one, i) => ({ id: `a${i}`, measurand: "x", sd: 0.1, ...one })),
      ...more,
    }),
  );
  return warnings.map(({ code, at }) => `${code} ${at}`);
}

const normal = (sd: number) => ({ tolerance: { family: "normal", sd } });

test("nothing is said of a campaign in order", () => {
  expect(warningsOf({ values: [{ value: 5 }, { value: 5.1 }] })).toEqual([]);
});

test("measurements that disagree are named, and leave the reference poor at p < 0.001", () => {
  // Chi-square of two equal uncertainties is (difference / sd)^2 / 2; p = 0.01 at 6.635, 0.001 at 10.83.
  const apart = (gap: number) =>
    warningsOf({ predictions: [], values: [{ value: 5 }, { value: 5 + gap }] });
  expect(apart(0.36)).toEqual([]);
  expect(apart(0.37)).toEqual(["disagreeing-measurements /measurands/0"]);
  expect(apart(0.47)).toEqual([
    "disagreeing-measurements /measurands/0",
    "poor-reference /measurands/0",
  ]);
});

test("a reference that its measurements lie far outside of is poor", () => {
  // The flat level stops at its bound: 0.4 beyond it is 4 sd, p = 6e-5, and no degree is spent.
  const codes = warningsOf({ predictions: [], values: [{ value: 10.4 }] });
  expect(codes).toEqual(["outside-reference /measurements/0", "poor-reference /measurands/0"]);
  expect(warningsOf({ predictions: [], values: [{ value: 10.2 }] })).toEqual([
    "outside-reference /measurements/0",
  ]);
});

test("a normal reference costs no degree of freedom, however far its measurements lie", () => {
  // chi2 = (z - 5)^2 / (1 + 0.01) against one degree: p = 0.001 at 10.83, 3.307 off.
  const off = (value: number) =>
    warningsOf({ reference: gaussian, predictions: [], values: [{ value }] });
  expect(off(8.3)).toEqual([]);
  expect(off(8.32)).toEqual(["poor-reference /measurands/0"]);
  expect(off(9.1)).toEqual(["outside-reference /measurements/0", "poor-reference /measurands/0"]);
});

test("an evidence with a standard error above 0.1 is approximate", () => {
  const document = documentFrom({
    hypotheses: [{ key: "h", title: "H", predictions: [] }],
  });
  const state = createState(document);
  if (!state.ok) throw new Error("it is right");
  const { frame, sums, tally } = state.value;
  const workspace = createWorkspace(frame, sums);
  const silence = scoreSilence(workspace);
  const rough = { ...silence, key: "h", pointer: "/hypotheses/0", lnEvidenceError: 0.11 };
  const { hypotheses, pairs } = standingsFrom(document);
  const context = { workspace, tally, silence, hypotheses, pairs, includeAfter: false };
  const warnings = allWarnings({ ...context, scores: [rough] });
  expect(warnings.map(({ code, at }) => `${code} ${at}`)).toEqual([
    "approximate-evidence /hypotheses/0",
  ]);
  expect(allWarnings({ ...context, scores: [{ ...rough, lnEvidenceError: 0.1 }] })).toEqual([]);
});

test("the same data among counted measurements is named once a key", () => {
  const sameData = "plate-7";
  const values = [
    { value: 5, sameData },
    { value: 5, sameData: "plate-8" },
    { value: 5, sameData },
    { value: 5, sameData },
  ];
  expect(warningsOf({ values })).toEqual(["same-data-twice /measurements/2"]);
  const aside = { setAside: { reason: "for the test" } };
  expect(warningsOf({ values: [values[0]!, { ...values[2], ...aside }] })).toEqual([]);
});

describe("against the reference", () => {
  test("an interval over more than 80 % of it is vague", () => {
    const vague = "vague-prediction /hypotheses/0/predictions/0";
    const values = [{ value: 5 }];
    expect(warningsOf({ predictions: [normal(1.99)], values })).toEqual([]);
    expect(warningsOf({ predictions: [normal(2.01)], values })).toEqual([vague]);
    // Within +-1.2816 sd of a normal lie 80 % (normal table).
    expect(warningsOf({ reference: gaussian, predictions: [normal(0.64)], values })).toEqual([]);
    expect(warningsOf({ reference: gaussian, predictions: [normal(0.65)], values })).toEqual([
      vague,
    ]);
  });

  test("a prediction outside it, or beyond 4 sd, is named", () => {
    const outside = "outside-reference /hypotheses/0/predictions/0";
    const predicted = (reference: Part, expected: number) =>
      warningsOf({ reference, predictions: [{ expected, ...normal(0.5) }], values: [] });
    expect(predicted(uniform, 10)).toEqual([]);
    expect(predicted(uniform, 10.1)).toEqual([outside]);
    expect(predicted(gaussian, 9)).toEqual([]);
    expect(predicted(gaussian, 9.1)).toEqual([outside]);
  });

  test("measurements outside it are counted at the first of them", () => {
    const values = [{ value: 5 }, { value: -0.2 }, { value: 10.05 }].map((one) => ({
      ...one,
      sd: 5,
    }));
    expect(warningsOf({ predictions: [], values })).toEqual(["outside-reference /measurements/1"]);
  });
});

describe("of hypotheses", () => {
  test("every one with data failing means that none describes them", () => {
    const values = [{ value: 5 }];
    const two = (second: number) =>
      warningsOf({ predictions: [{ expected: 5.4 }, { expected: second }], values });
    expect(two(4.5)).toContain("every-hypothesis-fails /hypotheses");
    expect(two(5.1)).toEqual([]);
  });

  test("more fails than one in a hundred would give is named", () => {
    const measurands = ["x", "y"].map((key) => ({ key, observable: "o", reference: uniform }));
    const failing = (count: number) => {
      const keys = ["x", "y"];
      const predictions = keys.map((measurand, i) => ({ measurand, expected: i < count ? 3 : 5 }));
      const hypotheses = [{ key: "h", title: "H", predictions }];
      const values = keys.map((measurand) => ({ measurand, value: 5 }));
      return warningsOf({ measurands, hypotheses, values });
    };
    // P(at least 1 of 2) = 0.0199, P(2 of 2) = 0.0001.
    expect(failing(1)).not.toContain("more-fails-than-chance /hypotheses/0");
    expect(failing(2)).toContain("more-fails-than-chance /hypotheses/0");
  });

  test("those filed between observation and posting are named", () => {
    const hypotheses = [
      {
        key: "h",
        title: "H",
        registeredAt: "2031-03-02T00:00:00Z",
        predictions: [{ measurand: "x", expected: 5 }],
      },
    ];
    const dated = { observedAt: "2031-03-01T00:00:00Z", postedAt: "2031-03-03T00:00:00Z" };
    expect(warningsOf({ hypotheses, values: [{ value: 5, ...dated }] })).toEqual([
      "registered-after-observation /hypotheses/0/predictions/0",
    ]);
  });
});
